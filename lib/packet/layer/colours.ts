/** The packet's colours: the light theme on white. Each darker one survives a black-and-white print as text or line. */
export const colours = {
  ink: '#15211f',
  soft: '#4c5a56',
  line: '#9aa59d',
  hair: '#cfd6cf',
  petrol: '#0d4f4c',
  lacquer: '#c9e83f',
  /** The margin rule at seven tenths over white: the file holds no transparency. */
  margin: '#cc8980',
  limit: '#b6574a',
  gap: '#9b2f22',
  warn: '#7d5200',
  steel: '#e3e6e3',
  white: '#ffffff',
} as const;
export type Colour = (typeof colours)[keyof typeof colours];

/** A number as PDF operators take it. Throws for what is no number: a broken drawing must not become a broken file. */
export const figure = (value: number): string => {
  if (!Number.isFinite(value)) throw new RangeError(`${value} cannot be drawn.`);
  const text = value.toFixed(3).replace(/\.?0+$/, '');
  return text === '-0' ? '0' : text;
};

/** `#15211f` as the operands of `rg` or `RG`. */
export function components(colour: string): string {
  return [1, 3, 5].map((at) => figure(parseInt(colour.slice(at, at + 2), 16) / 255)).join(' ');
}
