import { inflateSync } from 'node:zlib'
import { decode } from 'fast-png'
import { unpack } from './bits.ts'
import { damaged, UnsupportedGrib } from './gribError.ts'

const SIGNATURE_BYTES = 8
/** Length, type and checksum around the content of a chunk. */
const CHUNK_BYTES = 12

/** Samples of a pixel by PNG colour type (ISO/IEC 15948, table 11.1): grey, RGB, grey+alpha, RGBA. */
const CHANNELS: Readonly<Record<number, number | undefined>> = { 0: 1, 2: 3, 4: 2, 6: 4 }

/**
 * Decodes data template 7.41: a PNG image whose pixels are the packed integers, all bits of all samples
 * of a pixel taken together.
 * @throws GribError where the image is damaged or not of `points` pixels.
 */
export function unpackPng(bytes: Uint8Array, points: number): Float64Array {
  const { header, content } = imageChunks(bytes)
  const view = new DataView(header.buffer, header.byteOffset, header.length)
  const width = view.getUint32(0)
  const height = view.getUint32(4)
  const channels = CHANNELS[header[9]]
  if (width * height !== points) throw damaged(`a PNG image of ${width} by ${height} for ${points}`)
  if (channels === undefined || header[12] !== 0) {
    throw new UnsupportedGrib('a PNG image with a palette or interlaced')
  }
  const bits = header[8] * channels
  if (bits < 1 || bits > 32) throw new UnsupportedGrib(`PNG pixels of ${bits} bits`)

  const rowBytes = Math.ceil((width * bits) / 8)
  let pixels: Uint8Array
  try {
    // A small image can inflate to gigabytes, or to less than its size, and the library minds neither.
    const inflated = inflateSync(content, { maxOutputLength: height * (rowBytes + 1) })
    if (inflated.length !== height * (rowBytes + 1)) throw new Error('rows are missing')
    const image = decode(minimalPng(header, content))
    pixels = image.data instanceof Uint16Array ? bigEndian(image.data) : new Uint8Array(image.data)
  } catch (error) {
    throw damaged(`a PNG image that does not decode: ${String(error)}`)
  }
  const values = new Float64Array(points)
  for (let row = 0; row < height; row++) {
    unpack(pixels, row * rowBytes * 8, bits, width, values, row * width)
  }
  return values
}

/** The content of the IHDR chunk and of all IDAT chunks together. */
function imageChunks(bytes: Uint8Array): { header: Uint8Array; content: Uint8Array } {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.length)
  let header: Uint8Array | null = null
  const parts: Uint8Array[] = []
  let at = SIGNATURE_BYTES
  while (at + CHUNK_BYTES <= bytes.length) {
    const length = view.getUint32(at)
    const type = String.fromCharCode(...bytes.subarray(at + 4, at + 8))
    if (length > bytes.length - at - CHUNK_BYTES) throw damaged('a PNG image that is cut off')
    const chunk = bytes.subarray(at + 8, at + 8 + length)
    if (type === 'IHDR') header = chunk
    if (type === 'IDAT') parts.push(chunk)
    if (type === 'IEND') break
    at += CHUNK_BYTES + length
  }
  if (header?.length !== 13 || parts.length === 0) throw damaged('a PNG image without its parts')
  return { header, content: parts.length === 1 ? parts[0] : Buffer.concat(parts) }
}

/** The image again without ancillary chunks, which cannot matter here but could do harm. */
function minimalPng(header: Uint8Array, content: Uint8Array): Uint8Array {
  const chunk = (type: string, body: Uint8Array) => {
    const framed = Buffer.alloc(body.length + CHUNK_BYTES) // the library does not check the checksum
    framed.writeUInt32BE(body.length)
    framed.write(type, 4, 'latin1')
    framed.set(body, 8)
    return framed
  }
  const signature = Uint8Array.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a)
  return Buffer.concat([
    signature,
    chunk('IHDR', header),
    chunk('IDAT', content),
    chunk('IEND', new Uint8Array(0)),
  ])
}

function bigEndian(samples: Uint16Array): Uint8Array {
  const bytes = new Uint8Array(samples.length * 2)
  for (let index = 0; index < samples.length; index++) {
    bytes[2 * index] = samples[index] >>> 8
    bytes[2 * index + 1] = samples[index] & 0xff
  }
  return bytes
}
