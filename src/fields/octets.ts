import { damaged } from './gribError.ts'

/**
 * One section of a message, read by the octet numbers of the Manual on Codes (WMO-No. 306, vol. I.2),
 * which count from 1.
 */
export class Octets {
  readonly length: number
  /** The message the section stands in, and where in it octet 1 stands. */
  readonly message: Uint8Array
  readonly start: number
  private readonly view: DataView
  private readonly name: string

  constructor(message: Uint8Array, start: number, length: number, name: string) {
    this.message = message
    this.start = start
    this.length = length
    this.view = new DataView(message.buffer, message.byteOffset + start, length)
    this.name = name
  }

  u8(octet: number): number {
    return this.view.getUint8(this.place(octet, 1))
  }

  u16(octet: number): number {
    return this.view.getUint16(this.place(octet, 2))
  }

  u32(octet: number): number {
    return this.view.getUint32(this.place(octet, 4))
  }

  /** Sign and magnitude: the first bit is the sign (regulation 92.1.5). */
  s8(octet: number): number {
    const value = this.u8(octet)
    return value & 0x80 ? -(value & 0x7f) : value
  }

  s16(octet: number): number {
    const value = this.u16(octet)
    return value & 0x8000 ? -(value & 0x7fff) : value
  }

  s32(octet: number): number {
    const value = this.u32(octet)
    return value >= 2 ** 31 ? -(value - 2 ** 31) : value
  }

  /** IEEE 754 single precision. */
  f32(octet: number): number {
    return this.view.getFloat32(this.place(octet, 4))
  }

  /** A value of `scaled · 10^−factor` with its factor in one octet and its value in the next four. */
  scaled(octet: number): number {
    return this.u32(octet + 1) / 10 ** this.s8(octet)
  }

  /** The bytes from an octet to the section's end. */
  from(octet: number): Uint8Array {
    if (octet - 1 > this.length) throw this.short()
    return this.message.subarray(this.start + octet - 1, this.start + this.length)
  }

  private place(octet: number, size: number): number {
    if (octet - 1 + size > this.length) throw this.short()
    return octet - 1
  }

  private short() {
    return damaged(`${this.name} has only ${this.length} octets`)
  }
}
