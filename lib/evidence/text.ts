import { EvidenceError } from '@/lib/evidence/evidence-error';

/**
 * Text as it may be sealed: in Unicode normalisation form C, with line breaks as a single newline, because HTML
 * forms send them as carriage return and newline.
 *
 * @throws EvidenceError `text-refused` for a lone surrogate, a control other than newline and tab, or a character
 *   that only changes the direction of writing; `at` names the character and its place, counted from 1
 * @example normaliseText('Cafe\u0301'); // 'Café', four characters
 */
export function normaliseText(text: string): string {
  const lines = text.replaceAll('\r\n', '\n');
  let position = 0;
  for (const character of lines) {
    position += 1;
    const what = refusal(character.codePointAt(0) ?? 0);
    if (what !== null) {
      const name = `U+${(character.codePointAt(0) ?? 0).toString(16).toUpperCase().padStart(4, '0')}`;
      throw new EvidenceError(
        'text-refused',
        `Character ${position} of this text is ${what} (${name}), which cannot be sealed. Please remove it.`,
        { character: name, position },
      );
    }
  }
  return lines.normalize('NFC');
}

/**
 * Whether text is already as it may be sealed: `normaliseText` would give it back as it is.
 *
 * @example isAcceptableText('30 fl oz'); // true
 * @example isAcceptableText('safe\u202Egnp.exe'); // false
 */
export function isAcceptableText(text: string): boolean {
  try {
    return normaliseText(text) === text;
  } catch {
    return false;
  }
}

function refusal(code: number): string | null {
  if (code >= 0xd800 && code <= 0xdfff) return 'half of a character';
  if (code === 0x0a || code === 0x09) return null;
  if (code < 0x20 || (code >= 0x7f && code <= 0x9f)) return 'an invisible control character';
  // Unicode's Bidi_Control property: they can make a line read differently from what is stored.
  const isBidi =
    code === 0x061c ||
    code === 0x200e ||
    code === 0x200f ||
    (code >= 0x202a && code <= 0x202e) ||
    (code >= 0x2066 && code <= 0x2069);
  return isBidi ? 'an invisible mark that changes the direction of writing' : null;
}
