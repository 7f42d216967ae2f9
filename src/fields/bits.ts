import { damaged } from './gribError.ts'

/** A 32-bit store that is filled by whole bytes has room for values of up to this many bits. */
const NARROW = 24

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
  if (width <= NARROW) unpackNarrow(bytes, bit, width, count, out, at)
  else unpackWide(bytes, bit, width, count, out, at)
  return end
}

function unpackNarrow(
  bytes: Uint8Array,
  bit: number,
  width: number,
  count: number,
  out: Float64Array,
  at: number,
): void {
  const mask = (1 << width) - 1
  let byte = bit >>> 3
  let store = bytes[byte++]
  let held = 8 - (bit & 7)
  for (let index = at; index < at + count; index++) {
    while (held < width) {
      store = (store << 8) | bytes[byte++]
      held += 8
    }
    held -= width
    out[index] = (store >>> held) & mask
  }
}

function unpackWide(
  bytes: Uint8Array,
  bit: number,
  width: number,
  count: number,
  out: Float64Array,
  at: number,
): void {
  for (let index = at; index < at + count; index++) {
    const byte = bit >>> 3
    const skip = bit & 7
    // A byte past the end reads as undefined, which the bit operators take as 0.
    const window =
      (bytes[byte] << 24) | (bytes[byte + 1] << 16) | (bytes[byte + 2] << 8) | bytes[byte + 3]
    let value = (window << skip) >>> (32 - width)
    if (skip + width > 32) value = (value | (bytes[byte + 4] >>> (40 - skip - width))) >>> 0
    out[index] = value
    bit += width
  }
}
