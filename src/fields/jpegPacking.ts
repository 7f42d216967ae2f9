import openJpeg, { type OpenJpeg } from '@cornerstonejs/codec-openjpeg/decodewasmjs'
import { damaged, UnsupportedGrib } from './gribError.ts'

/** First markers of a codestream and the octets of the image size segment (ISO/IEC 15444-1, annex A). */
const CODESTREAM = [0xff, 0x4f, 0xff, 0x51] as const
const SIZE_SEGMENT_END = 43

/** The library hands out samples of at most 16 bits. */
const MOST_BITS = 16

/** A decoder that a damaged image has made larger than this, bytes, is not kept. */
const KEPT_HEAP = 256 * 2 ** 20

const ignore = () => undefined
let library: Promise<OpenJpeg> | null = null

/**
 * Decodes data template 7.40: a JPEG 2000 codestream of one component whose samples are the packed
 * integers.
 * @throws GribError where the image is damaged or not of `points` samples.
 */
export async function unpackJpeg(bytes: Uint8Array, points: number): Promise<Float64Array> {
  checkSize(bytes, points)
  library ??= openJpeg({ print: ignore, printErr: ignore })
  const openjpeg = await library
  try {
    const decoder = new openjpeg.J2KDecoder()
    decoder.getEncodedBuffer(bytes.length).set(bytes)
    decoder.decode()
    const { width, height, bitsPerSample, isSigned } = decoder.getFrameInfo()
    const decoded = decoder.getDecodedBuffer()
    if (width * height !== points || decoded.length !== points * (bitsPerSample > 8 ? 2 : 1)) {
      throw new Error('not all of the image could be decoded')
    }
    const samples = samplesOf(decoded, bitsPerSample, isSigned)
    decoder.delete()
    if (openjpeg.HEAPU8.length > KEPT_HEAP) library = null
    return samples
  } catch (error) {
    library = null // after a trap the instance cannot be trusted
    throw damaged(`a JPEG 2000 image that does not decode: ${String(error)}`)
  }
}

/** Looks at the image size before anything is allocated for it. */
function checkSize(bytes: Uint8Array, points: number): void {
  if (!CODESTREAM.every((octet, index) => bytes[index] === octet)) {
    throw damaged('JPEG 2000 packing without a codestream')
  }
  if (bytes.length < SIZE_SEGMENT_END) throw damaged('a JPEG 2000 image that is cut off')
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  const width = view.getUint32(8) - view.getUint32(16)
  const height = view.getUint32(12) - view.getUint32(20)
  const tiles = [24, 28].map((octet) => view.getUint32(octet))
  if (width * height !== points || width <= 0) {
    throw damaged(`a JPEG 2000 image of ${width} by ${height} for ${points}`)
  }
  if (tiles.some((size) => size === 0) || (width / tiles[0]) * (height / tiles[1]) > 65_535) {
    throw damaged('a JPEG 2000 image with too many tiles')
  }
  const components = view.getUint16(40)
  const bits = (bytes[42] & 0x7f) + 1
  if (components !== 1 || bits > MOST_BITS) {
    throw new UnsupportedGrib(`JPEG 2000 packing of ${components} components of ${bits} bits`)
  }
}

function samplesOf(decoded: Uint8Array, bits: number, signed: boolean): Float64Array {
  const bytes = decoded.slice() // out of the library's memory, and aligned
  if (bits <= 8) return Float64Array.from(signed ? new Int8Array(bytes.buffer) : bytes)
  return Float64Array.from(
    signed ? new Int16Array(bytes.buffer) : new Uint16Array(bytes.buffer), // WebAssembly is little-endian
  )
}
