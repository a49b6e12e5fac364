/** Every text inside a sealed value, wherever it stands. */
function* textsIn(value: unknown): Generator<string> {
  if (typeof value === 'string') yield value;
  else if (typeof value === 'object' && value !== null)
    for (const member of Object.values(value)) yield* textsIn(member);
}

const special = /[.*+?^${}()|[\]\\]/g;

/**
 * A test for values that spell out one of these names: whole, as words of their own, in capitals or not. A first name
 * alone, a nickname or a misspelling is not found.
 *
 * @example namesAnyOf(['Imke Vandersloot'])({ text: 'Held by imke vandersloot.' }) // true
 */
export function namesAnyOf(names: Iterable<string>): (value: unknown) => boolean {
  const patterns = [...new Set(names)]
    .map((name) => name.normalize('NFC').trim())
    .filter((name) => name !== '')
    .map((name) => name.replace(special, '\\$&').replace(/\s+/g, '\\s+'));
  if (patterns.length === 0) return () => false;
  const pattern = new RegExp(`(?<![\\p{L}\\p{N}])(?:${patterns.join('|')})(?![\\p{L}\\p{N}])`, 'iu');
  return (value) => [...textsIn(value)].some((text) => pattern.test(text));
}

/** Shorter numbers would be found by chance. */
const shortestNumber = 6;
const squeezed = (text: string) => text.toUpperCase().replace(/[^\p{L}\p{N}]/gu, '');

/**
 * A test for values that spell out one of these numbers (VIN, frame, engine), with spaces or hyphens or without.
 *
 * @example numbersAnyOf(['AAACRVSR3NA000417'])({ text: 'Plate AAACRVSR3 NA000417' }) // true
 */
export function numbersAnyOf(numbers: Iterable<string>): (value: unknown) => boolean {
  const wanted = [...numbers].map(squeezed).filter((number) => number.length >= shortestNumber);
  if (wanted.length === 0) return () => false;
  return (value) =>
    [...textsIn(value)].some((text) => {
      const letters = squeezed(text);
      return wanted.some((number) => letters.includes(number));
    });
}

/** 17 letters and digits without I, O and Q, the last four digits (ISO 3779; 49 CFR 565.15 for the four). */
const vinShape = /(?<![\p{L}\p{N}])[A-HJ-NPR-Z0-9]{13}[0-9]{4}(?![\p{L}\p{N}])/iu;

/**
 * Whether a value spells out what looks like a VIN, for a record whose own number was erased: nobody knows it any more,
 * and a text may still say it.
 *
 * @example looksIdentifying({ text: 'VIN AAACRVSR3NA000417' }) // true
 */
export function looksIdentifying(value: unknown): boolean {
  return [...textsIn(value)].some((text) => vinShape.test(text));
}
