import { BufrError } from './bufrError.ts'

/** One BUFR message, its sections taken apart. WMO-No. 306, volume I.2, FM 94 BUFR. */
export interface BufrMessage {
  edition: number
  masterTable: number
  dataCategory: number
  /** Nominal time, seconds since 1970, as section 1 tells it; null where it is none */
  time: number | null
  subsets: number
  compressed: boolean
  /** FXXYYY as one number, as section 3 lists them */
  descriptors: number[]
  /** Section 4 without its head */
  data: Uint8Array
}

const START = [0x42, 0x55, 0x46, 0x52] // BUFR
const END = [0x37, 0x37, 0x37, 0x37] // 7777

/** True where bytes begin with a BUFR message, at most a bulletin's heading before it. */
export function isBufr(bytes: Uint8Array): boolean {
  const start = find(bytes.subarray(0, 512), 0)
  return start !== -1 && bytes[start + 7] >= 1 && bytes[start + 7] <= 5
}

/**
 * Every message in some bytes, whatever stands between them, as a message or as the reason why it
 * cannot be read.
 */
export function* bufrMessages(bytes: Uint8Array): Generator<BufrMessage | BufrError> {
  let from = 0
  while (true) {
    const start = find(bytes, from)
    if (start === -1) return
    const length = number(bytes, start + 4, 3)
    const end = start + length
    from = start + START.length
    try {
      if (end > bytes.length) throw new BufrError('message cut short')
      if (length < 12 || !matches(bytes, end - END.length, END)) {
        throw new BufrError('message does not end where it says')
      }
      const message = takeApart(bytes.subarray(start, end - END.length))
      from = end
      yield message
    } catch (error) {
      if (!(error instanceof BufrError)) throw error
      yield error
    }
  }
}

function takeApart(bytes: Uint8Array): BufrMessage {
  const edition = bytes[7]
  if (edition < 2 || edition > 4) {
    throw new BufrError(`BUFR edition ${edition}; editions 2, 3 and 4 can be read`)
  }
  const identification = section(bytes, 8, edition === 4 ? 22 : 17)
  let next = 8 + identification.length
  if (identification[edition === 4 ? 9 : 7] & 0x80) next += section(bytes, next, 4).length
  const description = section(bytes, next, 7)
  next += description.length
  const content = section(bytes, next, 4)

  const descriptors: number[] = []
  for (let i = 7; i + 1 < description.length; i += 2) {
    const packed = number(description, i, 2)
    descriptors.push((packed >> 14) * 100_000 + ((packed >> 8) & 0x3f) * 1000 + (packed & 0xff))
  }
  return {
    edition,
    masterTable: identification[3],
    dataCategory: identification[edition === 4 ? 10 : 8],
    time: edition === 4 ? fullTime(identification) : shortTime(identification),
    subsets: number(description, 4, 2),
    compressed: (description[6] & 0x40) !== 0,
    descriptors,
    data: content.subarray(4),
  }
}

/** The section at an offset, by the length in its first three octets. */
function section(bytes: Uint8Array, offset: number, least: number): Uint8Array {
  const length = offset + 3 <= bytes.length ? number(bytes, offset, 3) : 0
  if (length < least || offset + length > bytes.length) {
    throw new BufrError('sections do not fit into the message')
  }
  return bytes.subarray(offset, offset + length)
}

function fullTime(identification: Uint8Array): number | null {
  const [month, day, hour, minute, second] = identification.subarray(17, 22)
  return timeOf(number(identification, 15, 2), month, day, hour, minute, second)
}

/** Editions before 4 give the year of the century, which began in 2001. */
function shortTime(identification: Uint8Array): number | null {
  const [year, month, day, hour, minute] = identification.subarray(12, 17)
  return timeOf(
    year > 70 && year < 100 ? 1900 + year : 2000 + (year % 100),
    month,
    day,
    hour,
    minute,
    0,
  )
}

/** Seconds since 1970 of a date and time; null where it is none. */
export function timeOf(
  year: number,
  month: number,
  day: number,
  hour: number,
  minute: number,
  second: number,
): number | null {
  const date = new Date(Date.UTC(year, month - 1, day, hour, minute))
  const whole = date.getUTCMonth() === month - 1 && date.getUTCDate() === day
  if (!whole || date.getUTCHours() !== hour || date.getUTCMinutes() !== minute) return null
  return date.getTime() / 1000 + (second < 60 ? second : 0)
}

function find(bytes: Uint8Array, from: number): number {
  let start = bytes.indexOf(START[0], from)
  while (start !== -1 && !matches(bytes, start, START)) start = bytes.indexOf(START[0], start + 1)
  return start + 8 <= bytes.length ? start : -1
}

function matches(bytes: Uint8Array, offset: number, wanted: readonly number[]): boolean {
  return wanted.every((byte, index) => bytes[offset + index] === byte)
}

function number(bytes: Uint8Array, offset: number, octets: number): number {
  let value = 0
  for (const byte of bytes.subarray(offset, offset + octets)) value = value * 256 + byte
  return value
}
