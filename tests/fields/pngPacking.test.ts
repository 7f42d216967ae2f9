import { crc32, deflateSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { GribError, UnsupportedGrib } from '../../src/fields/gribError.ts'
import { unpackPng } from '../../src/fields/pngPacking.ts'

/** A PNG image (ISO/IEC 15948) put together from its header's fields and its rows, filter bytes first. */
function png(
  width: number,
  height: number,
  depth: number,
  colour: number,
  rows: Buffer,
  interlace = 0,
): Buffer {
  const header = Buffer.alloc(13)
  header.writeUInt32BE(width, 0)
  header.writeUInt32BE(height, 4)
  header[8] = depth
  header[9] = colour
  header[12] = interlace
  return Buffer.concat([
    Buffer.from('89504e470d0a1a0a', 'hex'),
    chunk('IHDR', header),
    chunk('IDAT', deflateSync(rows)),
    chunk('IEND', Buffer.alloc(0)),
  ])
}

function chunk(type: string, content: Buffer): Buffer {
  const body = Buffer.concat([Buffer.from(type, 'latin1'), content])
  const framed = Buffer.alloc(body.length + 8)
  framed.writeUInt32BE(content.length)
  framed.set(body, 4)
  framed.writeUInt32BE(crc32(body), body.length + 4)
  return framed
}

describe('a packed image', () => {
  it.each([
    { depth: 1, rows: '00a8' + '0050', values: [1, 0, 1, 0, 1, 0, 1, 0, 1, 0] },
    { depth: 2, rows: '001b40' + '00e4c0', values: [0, 1, 2, 3, 1, 3, 2, 1, 0, 3] },
    { depth: 4, rows: '00123450' + '00abcdf0', values: [1, 2, 3, 4, 5, 10, 11, 12, 13, 15] },
    // The second row is filtered: each sample less the one above it (filter 2).
    {
      depth: 8,
      rows: '000a141e2832' + '020102030405',
      values: [10, 20, 30, 40, 50, 11, 22, 33, 44, 55],
    },
  ])('has samples of $depth bits with rows on whole bytes', ({ depth, rows, values }) => {
    const image = png(5, 2, depth, 0, Buffer.from(rows, 'hex'))
    expect([...unpackPng(image, 10)]).toEqual(values)
  })

  it('has the samples of a pixel taken together', () => {
    expect([...unpackPng(png(2, 1, 8, 2, Buffer.from('00010203fffefd', 'hex')), 2)]).toEqual([
      0x010203, 0xfffefd,
    ])
    expect([...unpackPng(png(1, 1, 8, 6, Buffer.from('00ff020304', 'hex')), 1)]).toEqual([
      0xff020304,
    ])
    expect([...unpackPng(png(2, 1, 16, 0, Buffer.from('000102fffe', 'hex')), 2)]).toEqual([
      258, 65_534,
    ])
  })
})

describe('an image that is not good', () => {
  it('is a typed error', () => {
    const good = png(5, 2, 8, 0, Buffer.alloc(12))
    expect(() => unpackPng(good, 9)).toThrow(GribError) // another number of points
    expect(() => unpackPng(good.subarray(0, 40), 10)).toThrow(GribError)
    expect(() => unpackPng(png(5, 2, 8, 0, Buffer.alloc(7)), 10)).toThrow(GribError) // a row missing
    expect(() => unpackPng(png(5, 2, 8, 3, Buffer.alloc(12)), 10)).toThrow(UnsupportedGrib)
    expect(() => unpackPng(png(5, 2, 8, 0, Buffer.alloc(12), 1), 10)).toThrow(UnsupportedGrib)
  })

  it('inflates no further than its size says', () => {
    const bomb = png(5, 2, 8, 0, Buffer.alloc(300_000_000))
    expect(bomb.length).toBeLessThan(400_000)
    const before = process.memoryUsage().rss
    expect(() => unpackPng(bomb, 10)).toThrow(GribError)
    expect(process.memoryUsage().rss - before).toBeLessThan(50e6)
  })
})
