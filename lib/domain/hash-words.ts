/**
 * A hash in groups of eight, as it is shown and read out.
 *
 * @example groupHash('9f2c41d70be86a53') // '9f2c41d7 0be86a53'
 */
export function groupHash(hex: string): string {
  return hex.match(/.{1,8}/gu)?.join(' ') ?? '';
}

/**
 * A fingerprint in groups of four, as people compare keys.
 *
 * @example groupFingerprint('9f2c41d7') // '9f2c 41d7'
 */
export function groupFingerprint(hex: string): string {
  return hex.match(/.{1,4}/gu)?.join(' ') ?? '';
}

/** How far the stripe of a witness mark may lean either way. */
const steepestLeanDegrees = 20;

/**
 * How far the stripe of an entry's witness mark leans, in degrees, so that each entry's differs a little: the first
 * two bytes of the leaf hash spread over −20 to 20.
 *
 * @throws RangeError when the hash is shorter than two bytes of hex
 * @example stripeLean('0000…') // -20
 */
export function stripeLean(leafHash: string): number {
  const word = /^[0-9a-f]{4}/.exec(leafHash)?.[0];
  if (word === undefined) throw new RangeError('A leaf hash is written in lower-case hex.');
  const share = Number.parseInt(word, 16) / 0xffff;
  return Math.round((share * 2 - 1) * steepestLeanDegrees * 10) / 10;
}
