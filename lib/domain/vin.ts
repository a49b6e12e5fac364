/** The result of reading a VIN. `vin` is the normalised text, also when refused. */
export interface VinCheck {
  ok: boolean;
  vin: string;
  /** What is doubtful but accepted: "not checked" outside North America. */
  warnings: string[];
  error?: string;
}

const vinLength = 17;
const checkPosition = 9;
const yearPosition = 10;
// 49 CFR 565.15, tables III and IV.
const letterValues: Readonly<Record<string, number>> = {
  A: 1, B: 2, C: 3, D: 4, E: 5, F: 6, G: 7, H: 8, J: 1, K: 2, L: 3, M: 4, N: 5, P: 7, R: 9,
  S: 2, T: 3, U: 4, V: 5, W: 6, X: 7, Y: 8, Z: 9,
}; // prettier-ignore
const weights = [8, 7, 6, 5, 4, 3, 2, 10, 0, 9, 8, 7, 6, 5, 4, 3, 2] as const;
const yearCodes = 'ABCDEFGHJKLMNPRSTVWXY123456789';
const firstCodeYear = 1980;
const yearCycle = 30;
const mistakenFor: Readonly<Record<string, string>> = { I: '1', O: '0', Q: '0' };

/**
 * A VIN as it is kept: capitals, without spaces and hyphens.
 *
 * @example normaliseVin('aaacrvsr 3na-000417') // 'AAACRVSR3NA000417'
 */
export function normaliseVin(text: string): string {
  return text
    .normalize('NFKC')
    .toUpperCase()
    .replace(/[\s\-–]/g, '');
}

/**
 * The check digit the other sixteen characters ask for: 0 to 9, or X for ten.
 * Source: 49 CFR 565.15(c).
 *
 * @throws RangeError when the text is no 17 characters of the VIN alphabet
 * @example checkDigit('1G4AH59H45G118341') // '4', the regulation's own example
 */
export function checkDigit(vin: string): string {
  if (!/^[A-HJ-NPR-Z0-9]{17}$/.test(vin)) throw new RangeError('A check digit needs 17 characters without I, O and Q.');
  const sum = [...vin].reduce((total, character, index) => {
    return total + (letterValues[character] ?? Number(character)) * (weights[index] ?? 0);
  }, 0);
  const remainder = sum % 11;
  return remainder === 10 ? 'X' : String(remainder);
}

/**
 * Whether a VIN's first character assigns it to North America, where the check digit is required.
 *
 * @example isNorthAmerican('1G4AH59H45G118341') // true; 1 to 5 (ISO 3780)
 */
export function isNorthAmerican(vin: string): boolean {
  return /^[1-5]/.test(vin);
}

/**
 * Reads a VIN. Refused: another length, characters a VIN never has, one character repeated, a wrong check digit where
 * it is required. Elsewhere a check digit that does not fit is a warning, for ISO 3779 does not ask for one.
 *
 * @example checkVin('12345678901234567').error // 'Position 9 is 9, but the other characters ask for 7. …'
 */
export function checkVin(text: string): VinCheck {
  const vin = normaliseVin(text);
  const refuse = (error: string): VinCheck => ({ ok: false, vin, warnings: [], error });
  if (vin === '') return refuse('Enter the VIN, or a frame number for a machine made before 1981.');
  const position = [...vin].findIndex((character) => !/^[A-HJ-NPR-Z0-9]$/.test(character));
  const wrong = [...vin][position];
  if (wrong !== undefined) {
    const instead = mistakenFor[wrong];
    const why =
      instead === undefined
        ? 'A VIN has only digits and capital letters.'
        : `A VIN has no I, O or Q: look for ${instead}.`;
    return refuse(`Position ${position + 1} is ${wrong}. ${why}`);
  }
  if (vin.length !== vinLength) {
    return refuse(
      `A VIN has ${vinLength} characters; this has ${vin.length}. Compare it with the frame, or enter it as a frame number.`,
    );
  }
  if (new Set(vin).size === 1)
    return refuse('One character repeated is a placeholder, not a VIN. Copy it from the frame.');
  const expected = checkDigit(vin);
  const given = vin[checkPosition - 1];
  const warnings: string[] = [];
  if (given !== expected) {
    if (isNorthAmerican(vin)) {
      return refuse(
        `Position ${checkPosition} is ${given}, but the other characters ask for ${expected}. Compare each with the frame.`,
      );
    }
    warnings.push('Not checked: outside North America a VIN need not carry a check digit. Compare it with the frame.');
  }
  if (modelYears(vin).length === 0)
    warnings.push(`Position ${yearPosition} is no year code; the model year cannot be read from it.`);
  return { ok: true, vin, warnings };
}

/**
 * The model years position 10 may stand for, earliest first; the code comes round every 30 years and motorcycles do
 * not say which round it is. Empty where it is no year code. Nothing later than two years from `thisYear` is offered.
 * Source: 49 CFR 565.15, table VII.
 *
 * @example modelYears('AAACRVSR3NA000417', 2026) // [1992, 2022]
 */
export function modelYears(vin: string, thisYear = 2039): number[] {
  const code = yearCodes.indexOf(vin[yearPosition - 1] ?? '?');
  if (code === -1) return [];
  const years = [firstCodeYear + code, firstCodeYear + code + yearCycle];
  return years.filter((year) => year <= thisYear + 2 && year < firstCodeYear + 2 * yearCycle);
}
