import { BufrError } from './bufrError.ts'

/** The widest number that is exact in a double. */
const WIDEST = 53

/** Reads unsigned numbers of any width off bytes, most significant bit first. */
export class BitReader {
  private readonly bytes: Uint8Array
  private readonly end: number
  private position = 0

  constructor(bytes: Uint8Array) {
    this.bytes = bytes
    this.end = bytes.length * 8
  }

  /** The next `width` bits as a number. Throws `BufrError` past the end. */
  read(width: number): number {
    if (width > WIDEST)
      throw new BufrError(`a number of ${width} bits; up to ${WIDEST} can be read`)
    this.claim(width)
    let value = 0
    let left = width
    while (left > 0) {
      const offset = this.position & 7
      const take = Math.min(8 - offset, left)
      const bits = (this.bytes[this.position >> 3] >> (8 - offset - take)) & ((1 << take) - 1)
      value = value * (1 << take) + bits
      this.position += take
      left -= take
    }
    return value
  }

  /** The next `octets` octets as characters; null where every bit is set, which marks them missing. */
  readText(octets: number): string | null {
    this.claim(octets * 8)
    const codes = Array.from({ length: octets }, () => this.read(8))
    if (codes.every((code) => code === 0xff)) return null
    return String.fromCharCode(...codes).replace(/[\0 ]+$/, '') // padded with blanks or zeros
  }

  private claim(width: number): void {
    if (this.position + width > this.end) throw new BufrError('data end before their description')
  }
}
