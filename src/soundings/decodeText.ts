import { BadSounding } from './badSounding.ts'

/** Bytes looked at to tell text from anything else. */
const PEEK = 4096

/**
 * The text in some bytes: UTF-8, or UTF-16 with a byte order mark, or else Latin-1, without the mark.
 * Throws `BadSounding` for bytes that are no text.
 */
export function decodeText(bytes: Uint8Array): string {
  const utf16 = bytes[0] === 0xff && bytes[1] === 0xfe
  const utf16Reversed = bytes[0] === 0xfe && bytes[1] === 0xff
  if (utf16 || utf16Reversed) return new TextDecoder(utf16 ? 'utf-16le' : 'utf-16be').decode(bytes)
  if (bytes.subarray(0, PEEK).some(isNoText)) {
    throw new BadSounding('unparseable', [{ message: 'not text: it holds control characters' }])
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes)
  } catch {
    return new TextDecoder('latin1').decode(bytes)
  }
}

/** Control characters other than those that lay out text and those that frame a message. */
function isNoText(byte: number): boolean {
  const framing = byte === 0x01 || byte === 0x03 || byte === 0x1e // SOH and ETX of a bulletin, RS
  return byte < 0x20 && !(byte >= 0x09 && byte <= 0x0d) && !framing
}
