import { unpack } from './bits.ts'
import { damaged } from './gribError.ts'
import { type Octets } from './octets.ts'

/** Templates 5.2 and 5.3: how the groups of a complex packing are described. */
interface Groups {
  count: number
  /** Bits of each group's reference value */
  referenceBits: number
  /** Code table 5.5: 0 none, 1 primary, 2 primary and secondary missing values */
  missing: number
  widthReference: number
  widthBits: number
  lengthReference: number
  lengthIncrement: number
  lastLength: number
  lengthBits: number
  /** Order of spatial differencing, 0 for none, and the octets of each of its descriptors */
  order: number
  descriptorOctets: number
}

function readGroups(representation: Octets, differenced: boolean): Groups {
  return {
    referenceBits: representation.u8(20),
    missing: representation.u8(23),
    count: representation.u32(32),
    widthReference: representation.u8(36),
    widthBits: representation.u8(37),
    lengthReference: representation.u32(38),
    lengthIncrement: representation.u8(42),
    lastLength: representation.u32(43),
    lengthBits: representation.u8(47),
    order: differenced ? representation.u8(48) : 0,
    descriptorOctets: differenced ? representation.u8(49) : 0,
  }
}

/**
 * Decodes complex packing, templates 7.2 and 7.3, into the packed integers; NaN where a value is missing.
 * WMO-No. 306, vol. I.2, data templates 7.2 and 7.3 and their notes.
 */
export function unpackComplex(
  representation: Octets,
  data: Octets,
  points: number,
  differenced: boolean,
): Float64Array {
  const groups = readGroups(representation, differenced)
  const { count, order, descriptorOctets } = groups
  const bytes = data.from(6)
  if (groups.missing > 2) throw damaged(`missing value management ${groups.missing}`)
  if (order > 2) throw damaged(`spatial differencing of order ${order}`) // 0 is what some encoders write for none
  if (count > points) throw damaged(`${count} groups for ${points} values`)
  if (descriptorOctets > 6) throw damaged(`differencing descriptors of ${descriptorOctets} octets`)

  // Each list starts on a whole octet.
  let bit = descriptorOctets * 8 * (order > 0 ? order + 1 : 0)
  const list = (width: number) => {
    if (width * count > bytes.length * 8) throw damaged(`${count} groups in ${bytes.length} octets`)
    const values = new Float64Array(count)
    bit = Math.ceil(unpack(bytes, bit, width, count, values, 0) / 8) * 8
    return values
  }
  const references = list(groups.referenceBits)
  const widths = list(groups.widthBits)
  const lengths = list(groups.lengthBits)
  let total = 0
  for (let group = 0; group < count; group++) {
    widths[group] += groups.widthReference
    lengths[group] =
      group === count - 1
        ? groups.lastLength
        : groups.lengthReference + lengths[group] * groups.lengthIncrement
    total += lengths[group]
  }
  if (total !== points) throw damaged(`groups of ${total} values for ${points}`)

  const values = new Float64Array(points)
  let at = 0
  for (let group = 0; group < count; group++) {
    bit = unpack(bytes, bit, widths[group], lengths[group], values, at)
    const end = at + lengths[group]
    markMissing(values, at, end, references[group], widths[group], groups)
    at = end
  }
  if (order > 0 && descriptorOctets > 0) undoDifferences(values, order, bytes, descriptorOctets)
  return values
}

/** Adds a group's reference to its values and puts NaN for those whose bits mean a missing value. */
function markMissing(
  values: Float64Array,
  from: number,
  to: number,
  reference: number,
  width: number,
  { missing, referenceBits }: Groups,
): void {
  // All ones is the primary missing value, one less the secondary; a group without bits tells by its reference.
  if (missing > 0 && width === 0) {
    if (referenceBits > 0 && reference >= 2 ** referenceBits - missing) reference = NaN
    values.fill(reference, from, to)
    return
  }
  const lowestMissing = missing > 0 ? 2 ** width - missing : Infinity
  for (let index = from; index < to; index++) {
    values[index] = values[index] >= lowestMissing ? NaN : values[index] + reference
  }
}

/** Sums differences of first or second order back up, passing over missing values. */
function undoDifferences(
  values: Float64Array,
  order: number,
  bytes: Uint8Array,
  octets: number,
): void {
  const descriptor = (which: number) => signed(bytes, which * octets, octets)
  const least = descriptor(order)
  let before = 0
  let last = 0
  let seen = 0
  for (let index = 0; index < values.length; index++) {
    const value = values[index]
    if (value !== value) continue
    let current: number
    if (seen < order) current = descriptor(seen)
    else if (order === 1) current = value + least + last
    else current = value + least + 2 * last - before
    values[index] = current
    before = last
    last = current
    seen++
  }
}

/** Sign and magnitude over a number of octets. */
function signed(bytes: Uint8Array, at: number, octets: number): number {
  if (at + octets > bytes.length) throw damaged('differencing descriptors past the end')
  let magnitude = bytes[at] & 0x7f
  for (let octet = 1; octet < octets; octet++) magnitude = magnitude * 256 + bytes[at + octet]
  return bytes[at] & 0x80 ? -magnitude : magnitude
}
