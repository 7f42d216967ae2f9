import { describe, expect, it } from 'vitest'
import { GribError } from '../../src/fields/gribError.ts'
import { gribMessages } from '../../src/fields/gribMessages.ts'
import { fixtureBytes, inChunks, readPlanes } from './fixture.ts'

async function offsets(bytes: Uint8Array, chunkSize?: number): Promise<number[]> {
  const found: number[] = []
  for await (const { offset } of gribMessages(inChunks(bytes, chunkSize))) found.push(offset)
  return found
}

async function problem(bytes: Uint8Array, chunkSize?: number): Promise<string> {
  try {
    await readPlanes(bytes, chunkSize)
  } catch (error) {
    if (error instanceof GribError) return error.problem
    throw error
  }
  return 'none'
}

const file = fixtureBytes('bitmaps')
const first = file.subarray(0, Number(file.readBigUInt64BE(8)))

describe('a stream of messages', () => {
  it.each([1, 7, 16, 100, 1_000_000])(
    'is cut the same in chunks of %d bytes',
    async (chunkSize) => {
      const cut = await offsets(file, chunkSize)
      expect(cut).toHaveLength(5)
      for (const offset of cut) expect(file.toString('latin1', offset, offset + 4)).toBe('GRIB')
      expect(await offsets(file)).toEqual(cut)
    },
  )

  it('passes over bulletin headings and padding between messages', async () => {
    const heading = Buffer.from('\x01\r\r\n001\r\r\nHTXA50 KWBC 101200\r\r\nGGRI GRI')
    const padded = Buffer.concat([heading, first, Buffer.alloc(300), first, heading])
    expect(await offsets(padded, 11)).toEqual([heading.length, heading.length + first.length + 300])
  })

  it('holds no more than a message and a chunk of a long file', async () => {
    let given = 0
    async function* long(): AsyncGenerator<Uint8Array> {
      const chunk = Buffer.concat(Array.from({ length: 50 }, () => file))
      for (let round = 0; round < 2000; round++) {
        given += chunk.length
        yield chunk
        await Promise.resolve()
      }
    }
    let messages = 0
    let held = 0
    const before = process.memoryUsage().arrayBuffers
    for await (const message of gribMessages(long())) {
      messages += message.bytes.length > 0 ? 1 : 0
      if (messages % 20_000 === 0)
        held = Math.max(held, process.memoryUsage().arrayBuffers - before)
    }
    expect(messages).toBe(2000 * 50 * 5)
    expect(given).toBeGreaterThan(200e6)
    expect(held).toBeLessThan(50e6)
  })

  it('names edition 1 and passes over it', async () => {
    const edition1 = Buffer.from('GRIB\0\0\x20\x01________________7777____7777')
    edition1.write('7777', 28, 'latin1')
    const { planes, skipped } = await readPlanes(Buffer.concat([edition1.subarray(0, 32), first]))
    expect(planes).toHaveLength(1)
    expect(skipped).toEqual([{ reason: 'GRIB edition 1', messages: 1 }])
  })
})

describe('a file that is not good', () => {
  it('is told apart by what is wrong', async () => {
    expect(await problem(Buffer.alloc(0))).toBe('not-grib')
    expect(await problem(Buffer.from('{"not": "GRIB"}'))).toBe('not-grib')
    expect(await problem(Buffer.alloc(10_000_000))).toBe('not-grib')
    expect(await problem(file.subarray(0, file.length - 1))).toBe('truncated')
    expect(await problem(file.subarray(0, 300))).toBe('truncated')
    const spoilt = Buffer.from(first)
    spoilt.write('7778', first.length - 4, 'latin1')
    expect(await problem(spoilt)).toBe('damaged')
  })

  it('may claim any length without taking memory for it', async () => {
    const claiming = Buffer.from(first)
    claiming.writeBigUInt64BE(100n * 2n ** 20n, 8)
    const before = process.memoryUsage().arrayBuffers
    expect(await problem(claiming)).toBe('truncated')
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(10e6)
    claiming.writeBigUInt64BE(2n ** 62n, 8)
    expect(await problem(claiming)).toBe('too-large')
    claiming.writeBigUInt64BE(3n, 8)
    expect(await problem(claiming)).toBe('damaged')
  })

  it('may claim four thousand million points without taking memory for them', async () => {
    const claiming = Buffer.from(first)
    const section3 = 16 + claiming.readUInt32BE(16)
    expect(claiming[section3 + 4]).toBe(3)
    claiming.writeUInt32BE(4_000_000_000, section3 + 6)
    expect(await problem(claiming)).toBe('too-large')
  })

  it('may claim as many equal values as are read, and no more', async () => {
    // 0 bits a value is a constant field: legal, and the most memory a short message can take.
    const claiming = Buffer.from(first)
    const section3 = 16 + claiming.readUInt32BE(16)
    claiming.writeUInt32BE(12_000_001, section3 + 6)
    claiming.writeUInt32BE(12_000_001, section3 + 30)
    claiming.writeUInt32BE(1, section3 + 34)
    expect(await problem(claiming)).toBe('too-large')
  })
})

it('names what it does not read, with the reason', async () => {
  const changed = (octet: number, value: number, section: number) => {
    const message = Buffer.from(first)
    let at = 16
    while (message[at + 4] !== section) at += message.readUInt32BE(at)
    message[at + octet - 1] = value
    return message
  }
  const reasons = [
    changed(9, 1, 4), // product template 4.1
    changed(11, 9, 4), // parameter number
    changed(23, 1, 4), // on the ground
    changed(29, 100, 4), // a layer between two pressures
    changed(18, 3, 4), // months
    changed(14, 40, 3), // a Gaussian grid
    changed(72, 0x08, 3), // shifted rows
    changed(11, 200, 5), // no such packing
    changed(6, 7, 6), // a bitmap of the centre's own
  ]
  const { planes, skipped } = await readPlanes(Buffer.concat(reasons))
  expect(planes).toEqual([])
  expect(skipped.map(({ reason }) => reason)).toEqual([
    'parameter 0-3-5: product template 4.1',
    "parameter 0-3-9: not a quantity of the flight's air",
    'parameter 0-3-5: on surface type 1, not on a pressure level',
    'parameter 0-3-5: on a layer, not on a pressure level',
    'parameter 0-3-5: forecast time in unit 3',
    'grid template 3.40',
    'grid rows shifted against each other',
    'data representation template 5.200',
    'bitmap 7 kept by the originating centre',
  ])
})
