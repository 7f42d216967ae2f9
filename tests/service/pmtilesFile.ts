import { crc32, deflateSync } from 'node:zlib'

/** A square PNG of one colour. PNG specification, third edition (W3C 2025), sections 5 and 11. */
export function plainPng(size: number, [red, green, blue]: [number, number, number]): Buffer {
  const header = Buffer.alloc(13)
  header.writeUInt32BE(size, 0)
  header.writeUInt32BE(size, 4)
  header.set([8, 2], 8)
  const row = Buffer.concat([Buffer.of(0), Buffer.alloc(3 * size, Buffer.of(red, green, blue))])
  return Buffer.concat([
    Buffer.of(0x89, 0x50, 0x4e, 0x47, 0x0d, 0x0a, 0x1a, 0x0a),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(Buffer.concat(Array.from({ length: size }, () => row)))),
    chunk('IEND', Buffer.alloc(0)),
  ])
}

function chunk(type: string, data: Buffer): Buffer {
  const named = Buffer.concat([Buffer.from(type, 'latin1'), data])
  const ends = Buffer.alloc(8)
  ends.writeUInt32BE(data.length, 0)
  ends.writeUInt32BE(crc32(named), 4)
  return Buffer.concat([ends.subarray(0, 4), named, ends.subarray(4)])
}

/** Types of tiles. PMTiles specification, version 3, section 3.2. */
export const tileTypes = { vector: 1, png: 2 } as const

/**
 * A PMTiles file that holds one tile for every place from zoom 0 to `maxZoom`. PMTiles specification,
 * version 3, sections 3 and 4.
 */
export function pmtilesFile(
  tile: Buffer,
  { maxZoom, type = tileTypes.png }: { maxZoom: number; type?: number },
): Buffer {
  const places = (4 ** (maxZoom + 1) - 1) / 3
  // One entry: tile id 0, run of all places, length, offset 0 (stored as offset + 1).
  const directory = Buffer.from([1, 0, places, tile.length, 1].flatMap(varint))
  const metadata = Buffer.from('{}')
  const header = Buffer.alloc(127)
  header.write('PMTiles', 'latin1')
  header[7] = 3
  const data = header.length + directory.length + metadata.length
  const spans = [
    [header.length, directory.length],
    [header.length + directory.length, metadata.length],
    [data, 0],
    [data, tile.length],
  ]
  for (const [index, value] of [...spans.flat(), places, 1, 1].entries()) {
    header.writeBigUInt64LE(BigInt(value), 8 + 8 * index)
  }
  // Clustered; directories and tiles not compressed; type; zooms.
  header.set([1, 1, 1, type, 0, maxZoom], 96)
  for (const [index, degrees] of [-180, -85, 180, 85].entries()) {
    header.writeInt32LE(degrees * 1e7, 102 + 4 * index)
  }
  return Buffer.concat([header, directory, metadata, tile])
}

function varint(value: number): number[] {
  return value < 128 ? [value] : [(value % 128) | 128, ...varint(Math.floor(value / 128))]
}
