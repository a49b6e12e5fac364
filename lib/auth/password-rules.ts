import { weakPasswords, weakWords } from './weak-passwords';

export const shortestPassword = 8;
/** Long enough for any phrase; the limit only keeps the work of hashing bounded. */
export const longestPassword = 256;

const ourWords = ['witnessmark', 'witness', 'witnessmarks'];

/** What people write for letters; undone before the look-up. */
const lookalikes: Record<string, string> = {
  '0': 'o',
  '1': 'i',
  '3': 'e',
  '4': 'a',
  '5': 's',
  '7': 't',
  '@': 'a',
  $: 's',
  '!': 'i',
};

/**
 * The sentence that refuses a new password, or null if it may be used. Length is counted in characters as a person
 * counts them; spaces and every script are allowed, and no mixture of kinds is asked for.
 *
 * @example passwordRefusal('password2024', { email: 'imke@post.example', name: 'Imke' }) // 'This is among …'
 */
export function passwordRefusal(password: string, about: { email?: string; name?: string } = {}): string | null {
  const length = Array.from(password).length;
  if (length < shortestPassword) {
    return `This has ${length} ${length === 1 ? 'character' : 'characters'}; use at least ${shortestPassword}. Fifteen or more is better: three or four words will do.`;
  }
  if (length > longestPassword) return `This has ${length} characters; use at most ${longestPassword}.`;
  if (isCommon(password))
    return 'This is among the passwords that are guessed first. Choose one nobody else would have.';
  if (isMadeOf(password, ourWords)) return 'This is little more than the name of this site. Choose something else.';
  const own = [...(about.email ?? '').split(/[@.+_-]/), ...(about.name ?? '').split(/\s+/), about.email ?? ''];
  if (isMadeOf(password, own))
    return 'This is little more than your name or your e-mail address. Choose something else.';
  return null;
}

function isCommon(password: string): boolean {
  const lower = password.normalize('NFKC').toLowerCase();
  if (new Set(lower).size <= 3 || isStep(lower)) return true;
  if (weakPasswords.has(lower) || weakWords.has(lower)) return true;
  return stems(lower).some((stem) => weakWords.has(stem));
}

/** With digits and marks at the ends taken off, and with look-alikes undone. */
function stems(lower: string): string[] {
  const trim = (text: string) => text.replace(/^[^\p{L}]+|[^\p{L}]+$/gu, '');
  const undone = (text: string) => Array.from(text, (character) => lookalikes[character] ?? character).join('');
  const found = [trim(lower), trim(undone(lower)), undone(trim(lower))];
  // A word written twice is still that word.
  return found.flatMap((stem) => {
    const half = stem.slice(0, stem.length / 2);
    return stem.length > 0 && half + half === stem ? [stem, half] : [stem];
  });
}

/** "abcdefghij", "98765432": each character is the neighbour of the one before. */
function isStep(text: string): boolean {
  const codes = Array.from(text, (character) => character.codePointAt(0) ?? 0);
  const steps = new Set(codes.slice(1).map((code, index) => code - (codes[index] ?? 0)));
  return steps.size === 1 && (steps.has(1) || steps.has(-1));
}

/** Whether fewer than four characters are left once these words are taken out; spaces and joints do not count. */
function isMadeOf(password: string, parts: string[]): boolean {
  const bare = (text: string) => text.toLowerCase().replace(/[\s._-]/g, '');
  const known = parts.map(bare).filter((part) => part.length >= 3);
  const whole = bare(password);
  const left = known.sort((a, b) => b.length - a.length).reduce((text, part) => text.replaceAll(part, ''), whole);
  return left !== whole && Array.from(left).length < 4;
}
