const table = Uint32Array.from({ length: 256 }, (_, byte) => {
  let value = byte;
  for (let bit = 0; bit < 8; bit += 1) value = value & 1 ? 0xedb88320 ^ (value >>> 1) : value >>> 1;
  return value;
});

/**
 * The check sum that a ZIP keeps of each file (ISO 3309, as zlib computes it). It finds damage, not forgery: that is
 * what the SHA-256 in the record is for.
 *
 * @param before the sum of what stands before these bytes, if they are a later piece
 * @example crc32(utf8('123456789')).toString(16); // 'cbf43926'
 */
export function crc32(bytes: Uint8Array, before = 0): number {
  let sum = ~before >>> 0;
  for (const byte of bytes) sum = (table[(sum ^ byte) & 255] ?? 0) ^ (sum >>> 8);
  return ~sum >>> 0;
}
