import { unpack } from './bits.ts'
import { decodeEntropy, readEntropyFlags } from './ccsdsPacking.ts'
import { unpackComplex } from './complexPacking.ts'
import { damaged, UnsupportedGrib } from './gribError.ts'
import { type Grid } from './grid.ts'
import { unpackJpeg } from './jpegPacking.ts'
import { type Octets } from './octets.ts'
import { unpackPng } from './pngPacking.ts'
import { inRows } from './scanning.ts'
import { type FieldSections } from './sections.ts'

/** Code table 6.0: the bitmap follows, was defined earlier in the message, or there is none. */
const BITMAP_HERE = 0
const BITMAP_BEFORE = 254
const NO_BITMAP = 255

/** Data representation templates that are read. */
const READ_TEMPLATES: ReadonlySet<number> = new Set([0, 2, 3, 40, 41, 42])

/**
 * The values of a message at every point of its grid, in rows that run like the first one and follow
 * each other as in the message; NaN where a value is missing. In the unit of the code tables.
 * @throws UnsupportedGrib for packings other than templates 5.0, 5.2, 5.3, 5.40, 5.41 and 5.42.
 */
export async function readValues(sections: FieldSections, grid: Grid): Promise<Float64Array> {
  const points = grid.columns * grid.rows
  const { representation } = sections
  const template = representation.u16(10)
  if (!READ_TEMPLATES.has(template)) {
    throw new UnsupportedGrib(`data representation template 5.${template}`)
  }
  const packed = representation.u32(6)
  const present = presence(sections, points)
  if (packed !== (present ? countOnes(present, points) : points)) {
    throw damaged(`${packed} values for ${points} grid points`)
  }
  const values =
    packed === 0 || isConstant(representation, template)
      ? new Float64Array(packed).fill(referenceValue(representation))
      : scale(await packedIntegers(representation, sections.data, packed), representation)
  const spread = present ? atGridPoints(values, present, points) : values
  return inRows(spread, grid.columns, grid.rows, grid.scanning)
}

/** The packed integers X of a message's section 7; NaN where a value is missing. */
async function packedIntegers(
  representation: Octets,
  data: Octets,
  packed: number,
): Promise<Float64Array> {
  const template = representation.u16(10)
  const bits = representation.u8(20)
  switch (template) {
    case 0: {
      const bytes = data.from(6)
      if (bits * packed > bytes.length * 8)
        throw damaged(`${packed} values of ${bits} bits cut off`)
      const values = new Float64Array(packed)
      unpack(bytes, 0, bits, packed, values, 0)
      return values
    }
    case 2:
    case 3:
      return unpackComplex(representation, data, packed, template === 3)
    case 40:
      return unpackJpeg(data.from(6), packed)
    case 41:
      return unpackPng(data.from(6), packed)
    default: // 42
      return decodeEntropy(
        data.from(6),
        {
          bitsPerSample: bits,
          ...readEntropyFlags(representation.u8(22)),
          blockSize: representation.u8(23),
          referenceInterval: representation.u16(24),
        },
        packed,
      )
  }
}

/** Without bits every value is the same, and nothing is packed; complex packing says so by having no groups. */
function isConstant(representation: Octets, template: number): boolean {
  const isComplex = template === 2 || template === 3
  return (isComplex ? representation.u32(32) : representation.u8(20)) === 0
}

/** R: in a constant field the value itself, as encoders in general use write it whatever D says. */
function referenceValue(representation: Octets): number {
  const reference = representation.f32(12)
  if (!Number.isFinite(reference)) throw damaged('a reference value that is not a number')
  return reference
}

/** Y = (R + X·2^E)·10^−D in place. WMO-No. 306, vol. I.2, regulation 92.9.4. */
function scale(values: Float64Array, representation: Octets): Float64Array {
  const reference = referenceValue(representation)
  const binary = 2 ** representation.s16(16)
  const decimal = 10 ** -representation.s16(18)
  for (let index = 0; index < values.length; index++) {
    values[index] = (reference + values[index] * binary) * decimal
  }
  return values
}

/** The bitmap that applies, one bit a grid point, or null where every point has a value. */
function presence(sections: FieldSections, points: number): Uint8Array | null {
  const indicator = sections.bitmap.u8(6)
  if (indicator === NO_BITMAP) return null
  const section = indicator === BITMAP_BEFORE ? sections.definedBitmap : sections.bitmap
  if (section === null) throw damaged('a bitmap that was to be defined before')
  if (section.u8(6) !== BITMAP_HERE) {
    throw new UnsupportedGrib(`bitmap ${section.u8(6)} kept by the originating centre`)
  }
  const bits = section.from(7)
  if (bits.length * 8 < points)
    throw damaged(`a bitmap of ${bits.length} octets for ${points} points`)
  return bits
}

function countOnes(bits: Uint8Array, points: number): number {
  let ones = 0
  for (let point = 0; point < points; point++) ones += (bits[point >>> 3] >>> (7 - (point & 7))) & 1
  return ones
}

function atGridPoints(values: Float64Array, present: Uint8Array, points: number): Float64Array {
  const spread = new Float64Array(points)
  let next = 0
  for (let point = 0; point < points; point++) {
    const there = (present[point >>> 3] >>> (7 - (point & 7))) & 1
    spread[point] = there ? values[next++] : NaN
  }
  return spread
}
