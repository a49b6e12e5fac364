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
