import { damaged } from './gribError.ts'

/**
 * Unpacks `count` unsigned integers of `width` bits (0 to 32) that stand one after the other from bit
 * `bit` of `bytes`, first bit highest, into `out` from `at`. Returns the bit after the last one.
 * @throws GribError where the bytes end first.
 */
export function unpack(
  bytes: Uint8Array,
  bit: number,
  width: number,
  count: number,
  out: Float64Array,
  at: number,
): number {
  if (width === 0) {
    out.fill(0, at, at + count)
    return bit
  }
  const end = bit + width * count
  if (width > 32) throw damaged(`values of ${width} bits`)
  if (end > bytes.length * 8) throw damaged('packed values that run past the end of their section')
  if (width === 8 || width === 16) {
    unpackWhole(bytes, bit, width, count, out, at)
    return end
  }
  const shift = 32 - width
  for (let index = at; index < at + count; index++) {
    const byte = bit >>> 3
    const skip = bit & 7
    // A byte past the end reads as undefined, which the bit operators take as 0.
    const window =
      (bytes[byte] << 24) | (bytes[byte + 1] << 16) | (bytes[byte + 2] << 8) | bytes[byte + 3]
    let value = (window << skip) >>> shift
    if (skip + width > 32) value = (value | (bytes[byte + 4] >>> (40 - skip - width))) >>> 0
    out[index] = value
    bit += width
  }
  return end
}

/** `unpack` for whole bytes. */
function unpackWhole(
  bytes: Uint8Array,
  bit: number,
  width: 8 | 16,
  count: number,
  out: Float64Array,
  at: number,
): void {
  if (bit % 8 !== 0) {
    for (let index = 0; index < count; index++) {
      const place = bit + index * width
      const byte = place >>> 3
      const window = (bytes[byte] << 16) | (bytes[byte + 1] << 8) | bytes[byte + 2]
      out[at + index] = ((window << (8 + (place & 7))) >>> (32 - width)) >>> 0
    }
    return
  }
  let byte = bit >>> 3
  for (let index = at; index < at + count; index++) {
    if (width === 8) out[index] = bytes[byte++]
    else {
      out[index] = (bytes[byte] << 8) | bytes[byte + 1]
      byte += 2
    }
  }
}
