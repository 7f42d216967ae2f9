import { damaged } from './gribError.ts'
import { Octets } from './octets.ts'

/** The sections that make one field: a message holds one or, where it repeats sections, more. */
export interface FieldSections {
  /** Octet 7 of section 0 */
  discipline: number
  identification: Octets
  grid: Octets
  product: Octets
  representation: Octets
  bitmap: Octets
  /** The bitmap last defined in full in this message, where `bitmap` refers back to it */
  definedBitmap: Octets | null
  data: Octets
}

/** Section numbers that may follow each section. WMO-No. 306, vol. I.2, regulation 92.1.2 to 92.1.4. */
const FOLLOWERS: Readonly<Record<number, readonly number[]>> = {
  0: [1],
  1: [2, 3],
  2: [3],
  3: [4],
  4: [5],
  5: [6],
  6: [7],
  7: [2, 3, 4],
}

const INDICATOR_OCTETS = 16
const END_OCTETS = 4

/**
 * Walks the sections of one whole edition 2 message. Section 2, for local use, is passed over.
 * @throws GribError where lengths or order contradict the message.
 */
export function* fieldSections(message: Uint8Array): Generator<FieldSections> {
  const indicator = new Octets(message, 0, INDICATOR_OCTETS, 'section 0')
  const end = message.length - END_OCTETS
  const latest: Octets[] = []
  let definedBitmap: Octets | null = null
  let previous = 0
  let at = INDICATOR_OCTETS
  while (at < end) {
    if (end - at < 5) throw damaged(`${end - at} octets left over before 7777`)
    const head = new Octets(message, at, 5, 'a section')
    const length = head.u32(1)
    const number = head.u8(5)
    if (!(FOLLOWERS[previous] ?? []).includes(number)) {
      throw damaged(`section ${number} follows section ${previous}`)
    }
    if (length < 5 || length > end - at) {
      throw damaged(`section ${number} claims ${length} octets of the ${end - at} that are left`)
    }
    const section = new Octets(message, at, length, `section ${number}`)
    latest[number] = section
    if (number === 6 && section.u8(6) !== 254 && section.u8(6) !== 255) definedBitmap = section
    if (number === 7) {
      yield {
        discipline: indicator.u8(7),
        identification: latest[1],
        grid: latest[3],
        product: latest[4],
        representation: latest[5],
        bitmap: latest[6],
        definedBitmap,
        data: section,
      }
    }
    previous = number
    at += length
  }
  if (previous !== 7) throw damaged(`the message ends after section ${previous}`)
}
