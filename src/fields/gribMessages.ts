import { GribError } from './gribError.ts'

/** One whole message, from its "GRIB" to its "7777". */
export interface GribMessage {
  bytes: Uint8Array
  /** Edition of the GRIB code: 2 is read here */
  edition: number
  /** Where the message begins in the file, bytes */
  offset: number
}

export interface MessageLimits {
  /** Greatest length of a message, bytes */
  messageBytes: number
  /** Greatest stretch between two messages that is passed over, bytes: bulletin headings, padding */
  gapBytes: number
}

export const DEFAULT_MESSAGE_LIMITS: MessageLimits = {
  messageBytes: 128 * 2 ** 20,
  gapBytes: 64 * 2 ** 10,
}

/** Octets 1 to 16 hold all that tells where a message ends, in every edition. */
const INDICATOR_BYTES = 16

const GRIB = [0x47, 0x52, 0x49, 0x42] as const
const SEVENS = [0x37, 0x37, 0x37, 0x37] as const

/**
 * Cuts a stream of bytes into messages. Holds one message and one chunk at a time; a message that
 * claims to be long takes memory only as its bytes arrive.
 * @throws GribError where no message follows, one is cut off, too long or not closed by "7777".
 */
export async function* gribMessages(
  chunks: AsyncIterable<Uint8Array>,
  limits: MessageLimits = DEFAULT_MESSAGE_LIMITS,
): AsyncGenerator<GribMessage> {
  /** Where the bytes not yet dealt with begin in the file. */
  let offset = 0
  let gap = 0
  let found = false
  /** Chunks of a message that is not whole yet, and their length together. */
  let parts: Uint8Array[] = []
  let partBytes = 0
  let wanted = INDICATOR_BYTES

  for await (const chunk of chunks) {
    if (chunk.length === 0) continue
    parts.push(chunk)
    partBytes += chunk.length
    if (partBytes < wanted) continue
    let held = joined(parts, partBytes)

    let at = 0
    wanted = INDICATOR_BYTES
    while (held.length - at >= INDICATOR_BYTES) {
      if (!startsWith(held, at, GRIB)) {
        const next = nextStart(held, at + 1)
        gap += next - at
        at = next
        if (gap > limits.gapBytes) throw noMessage(offset + at, gap)
        continue
      }
      const { edition, length } = indicator(held, at, offset + at, limits)
      if (held.length - at < length) {
        wanted = length
        break
      }
      const bytes = held.subarray(at, at + length)
      if (!startsWith(bytes, length - SEVENS.length, SEVENS)) {
        throw new GribError(
          'damaged',
          `the message at byte ${offset + at} does not end with 7777 after its ${length} bytes`,
        )
      }
      found = true
      gap = 0
      yield { bytes, edition, offset: offset + at }
      at += length
    }
    held = held.subarray(at)
    offset += at
    parts = held.length > 0 ? [held] : []
    partBytes = held.length
  }

  if (partBytes > 0) {
    const rest = joined(parts, partBytes)
    if (startsWith(rest, 0, GRIB)) {
      throw new GribError('truncated', `the file ends inside the message at byte ${offset}`)
    }
  }
  if (!found) throw new GribError('not-grib', 'the file holds no GRIB message')
}

/** Section 0: the edition and the whole length of a message. */
function indicator(
  bytes: Uint8Array,
  at: number,
  fileOffset: number,
  limits: MessageLimits,
): { edition: number; length: number } {
  const view = new DataView(bytes.buffer, bytes.byteOffset + at, INDICATOR_BYTES)
  const edition = view.getUint8(7)
  let length: number
  if (edition === 1) length = view.getUint32(4) >>> 8
  else if (edition === 2) length = view.getUint32(8) * 2 ** 32 + view.getUint32(12)
  else throw new GribError('damaged', `the message at byte ${fileOffset} claims edition ${edition}`)
  if (length > limits.messageBytes) {
    throw new GribError(
      'too-large',
      `the message at byte ${fileOffset} claims ${length} bytes; at most ${limits.messageBytes} are read`,
    )
  }
  if (length < INDICATOR_BYTES + SEVENS.length) {
    throw new GribError('damaged', `the message at byte ${fileOffset} claims ${length} bytes`)
  }
  return { edition, length }
}

/** Where "GRIB" next stands at or after `from`; else so near the end that its start might. */
function nextStart(bytes: Uint8Array, from: number): number {
  for (let at = bytes.indexOf(GRIB[0], from); at >= 0; at = bytes.indexOf(GRIB[0], at + 1)) {
    if (at > bytes.length - GRIB.length || startsWith(bytes, at, GRIB)) return at
  }
  return bytes.length
}

function startsWith(bytes: Uint8Array, at: number, letters: readonly number[]): boolean {
  return letters.every((letter, index) => bytes[at + index] === letter)
}

function noMessage(at: number, gap: number): GribError {
  return new GribError('not-grib', `no GRIB message in the ${gap} bytes before byte ${at}`)
}

function joined(parts: readonly Uint8Array[], length: number): Uint8Array {
  if (parts.length === 1) return parts[0]
  const whole = new Uint8Array(length)
  let at = 0
  for (const part of parts) {
    whole.set(part, at)
    at += part.length
  }
  return whole
}
