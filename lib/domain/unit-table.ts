import type { UnitCode } from '@/lib/evidence/format';

export type Dimension =
  | 'volume'
  | 'mass'
  | 'count'
  | 'torque'
  | 'angle'
  | 'distance'
  | 'time'
  | 'pressure'
  | 'length'
  | 'temperature'
  | 'voltage';

export interface Unit {
  code: UnitCode;
  /** What people see: `US qt`, `lbf·ft`. */
  label: string;
  dimension: Dimension;
  /** One of this unit is exactly `factor / per` of the dimension's base unit. */
  factor: string;
  /** 1 unless the factor is a fraction no decimal can hold (psi, °F). */
  per: string;
  /** What is taken off before scaling: 32 for °F, else 0. */
  offset: string;
  /** Digits after the decimal mark when a converted figure is shown. */
  decimals: number;
  /** What people may type, lower case, without spaces, dots and hyphens. */
  spellings: readonly string[];
}

function unit(
  code: UnitCode,
  label: string,
  dimension: Dimension,
  factor: string,
  decimals: number,
  spellings: readonly string[],
  fraction: { per?: string; offset?: string } = {},
): Unit {
  return {
    code,
    label,
    dimension,
    factor,
    per: fraction.per ?? '1',
    offset: fraction.offset ?? '0',
    decimals,
    spellings,
  };
}

// Factors are exact by definition: NIST SP 811 appendix B, NIST Handbook 44 appendix C, UK Units of Measurement
// Regulations for the imperial gallon (4.54609 L). The psi is kept as the fraction it is defined by:
// 4.4482216152605 N over 0.00064516 m².
const rows: readonly Unit[] = [
  unit('mL', 'mL', 'volume', '1', 0, ['ml', 'millilitre', 'milliliter', 'millilitres', 'milliliters', 'cc']),
  unit('L', 'L', 'volume', '1000', 2, ['l', 'litre', 'liter', 'litres', 'liters']),
  unit('[foz_us]', 'US fl oz', 'volume', '29.5735295625', 1, ['usfloz', 'usoz', 'flozus', 'floz(us)']),
  unit('[pt_us]', 'US pt', 'volume', '473.176473', 2, ['uspt', 'uspint', 'uspints']),
  unit('[qt_us]', 'US qt', 'volume', '946.352946', 2, ['usqt', 'usquart', 'usquarts', 'qtus', 'qt(us)']),
  unit('[gal_us]', 'US gal', 'volume', '3785.411784', 3, ['usgal', 'usgallon', 'usgallons']),
  unit('[foz_br]', 'imp fl oz', 'volume', '28.4130625', 1, ['impfloz', 'impoz', 'imperialfloz', 'ukfloz']),
  unit('[qt_br]', 'imp qt', 'volume', '1136.5225', 2, ['impqt', 'impquart', 'imperialqt', 'imperialquart', 'ukqt']),
  unit('[gal_br]', 'imp gal', 'volume', '4546.09', 3, [
    'impgal',
    'impgallon',
    'imperialgal',
    'imperialgallon',
    'ukgal',
  ]),
  unit('g', 'g', 'mass', '1', 0, ['g', 'gram', 'grams', 'gramme', 'grammes']),
  unit('{piece}', 'pieces', 'count', '1', 0, ['piece', 'pieces', 'pc', 'pcs', 'pce']),
  unit('N.m', 'N·m', 'torque', '1', 1, ['nm', 'newtonmetre', 'newtonmeter', 'newtonmetres', 'newtonmeters']),
  unit('[ft_i].[lbf_av]', 'lbf·ft', 'torque', '1.3558179483314004', 1, [
    'lbfft', 'ftlbf', 'lbft', 'ftlb', 'ftlbs', 'lbsft', 'footpound', 'footpounds', 'poundfeet',
  ]), // prettier-ignore
  unit('[in_i].[lbf_av]', 'lbf·in', 'torque', '0.1129848290276167', 0, [
    'lbfin', 'inlbf', 'lbin', 'inlb', 'inlbs', 'lbsin', 'inchpound', 'inchpounds',
  ]), // prettier-ignore
  unit('kgf.m', 'kgf·m', 'torque', '9.80665', 2, ['kgfm', 'kgm', 'mkg', 'mkgf', 'kpm']),
  unit('deg', '°', 'angle', '1', 0, ['°', 'deg', 'degree', 'degrees']),
  unit('km', 'km', 'distance', '1', 0, ['km', 'kms', 'kilometre', 'kilometer', 'kilometres', 'kilometers']),
  unit('[mi_i]', 'mi', 'distance', '1.609344', 0, ['mi', 'mile', 'miles']),
  unit('h', 'h', 'time', '1', 1, ['h', 'hr', 'hrs', 'hour', 'hours']),
  unit('kPa', 'kPa', 'pressure', '1', 0, ['kpa']),
  unit('bar', 'bar', 'pressure', '100', 2, ['bar', 'bars']),
  unit('[psi]', 'psi', 'pressure', '4.4482216152605', 1, ['psi', 'lbfin2', 'lb/in2', 'lbf/in2'], { per: '0.64516' }),
  unit('mm', 'mm', 'length', '1', 1, ['mm', 'millimetre', 'millimeter', 'millimetres', 'millimeters']),
  unit('[in_i]', 'in', 'length', '25.4', 3, ['in', 'inch', 'inches', '"', '″', '”']),
  unit('Cel', '°C', 'temperature', '1', 0, ['°c', 'c', 'degc', 'celsius']),
  unit('[degF]', '°F', 'temperature', '5', 0, ['°f', 'f', 'degf', 'fahrenheit'], { per: '9', offset: '32' }),
  unit('V', 'V', 'voltage', '1', 2, ['v', 'volt', 'volts']),
];

/** Every unit a record may use, by its UCUM code. */
export const units = Object.fromEntries(rows.map((row) => [row.code, row])) as Record<UnitCode, Unit>;

/** The unit in which each dimension's factors are written. */
export const baseUnits: Record<Dimension, UnitCode> = {
  volume: 'mL',
  mass: 'g',
  count: '{piece}',
  torque: 'N.m',
  angle: 'deg',
  distance: 'km',
  time: 'h',
  pressure: 'kPa',
  length: 'mm',
  temperature: 'Cel',
  voltage: 'V',
};

/** Names that mean different amounts in different countries: never taken, always asked about. */
export const ambiguousNames: Readonly<Record<string, string>> = {
  qt: 'Which quart? A US quart is 946 mL, an imperial quart 1,137 mL. Choose US qt or imp qt.',
  oz: 'Which ounce? A US fluid ounce is 29.6 mL, an imperial one 28.4 mL. Choose US fl oz or imp fl oz.',
  pt: 'Which pint? A US pint is 473 mL; for an imperial pint give the amount in mL.',
  gal: 'Which gallon? A US gallon is 3,785 mL, an imperial gallon 4,546 mL. Choose US gal or imp gal.',
  lb: 'Pounds alone are not a torque. Choose lbf·ft or lbf·in.',
};
export const ambiguousSpellings: Readonly<Record<string, keyof typeof ambiguousNames>> = {
  qt: 'qt', qts: 'qt', quart: 'qt', quarts: 'qt',
  oz: 'oz', ozs: 'oz', floz: 'oz', ounce: 'oz', ounces: 'oz', fluidounce: 'oz', fluidounces: 'oz',
  pt: 'pt', pts: 'pt', pint: 'pt', pints: 'pt',
  gal: 'gal', gals: 'gal', gallon: 'gal', gallons: 'gal',
  lb: 'lb', lbs: 'lb', lbf: 'lb', pound: 'lb', pounds: 'lb',
}; // prettier-ignore
