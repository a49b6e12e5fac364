import { charactersShown } from './limits';

/** The beginning of a text, if a hostile file made it longer than anybody reads; and says so. */
export function cut(text: string): string {
  if (text.length <= charactersShown) return text;
  return `${text.slice(0, charactersShown)} … (cut here: ${text.length} characters)`;
}
