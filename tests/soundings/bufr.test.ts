import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { readBufr } from '../../src/soundings/bufr.ts'
import { BufrError } from '../../src/soundings/bufrError.ts'
import { bufrMessages } from '../../src/soundings/bufrMessage.ts'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { Notes } from '../../src/soundings/notes.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { BadSounding } from '../../src/soundings/badSounding.ts'
import { brokenPromises, fixture, refusalOf } from './samples.ts'

const DEGREE = Math.PI / 180
const giles = fixture('temp-giles-2016-02-18.bufr')
const barrow = fixture('barrow-309052.bufr')
const compressed = fixture('three-subsets-compressed.bufr')

describe('a real BUFR message (expected values from the reference decoder)', () => {
  const [report] = readBufr(giles, new Notes())

  it('tells station, release and position', () => {
    expect(report.station).toBe('94461')
    expect(report.validAt).toBe(Date.UTC(2016, 1, 18, 23, 17, 44) / 1000)
    expect(report.latitude).toBeCloseTo(-25.0341 * DEGREE, 6)
    expect(report.longitude).toBeCloseTo(128.301 * DEGREE, 6)
  })

  it('has 127 levels with elapsed time, the second with wind and displacement', () => {
    expect(report.levels).toHaveLength(127)
    const second = report.levels[1]
    expect(second).toMatchObject({
      elapsed: 0,
      pressure: 94_360,
      geopotentialHeight: 599,
      windSpeed: 8.2,
    })
    expect(second.temperature).toBeCloseTo(298.05, 8)
    expect(second.dewPoint).toBeCloseTo(282.01, 8)
    expect(second.windFrom).toBeCloseTo(137 * DEGREE, 8)
    expect(second.displacement?.longitude).toBeCloseTo(-1e-5 * DEGREE, 12)
    expect(report.levels.at(-1)).toMatchObject({
      elapsed: 246,
      pressure: 81_140,
      geopotentialHeight: 1903,
    })
  })

  it('cannot be flown in, with one wind only', () => {
    const refused = refusalOf(giles)
    expect(refused.unparseable).toBe(false)
    expect(refused.problems[0].message).toContain('message 1: 1 level with wind')
  })
})

describe('BUFR', () => {
  it.each([
    ['barrow-309052', 273.15, 12],
    ['barrow-309057', 273.15, 12],
    ['barrow-309007-edition3', 273.1, 12.24], // 12 gpm are 117.7 m²/s², which it gives to tens
  ])('%s is the ascent that it was made of', (name, temperature, height) => {
    const [sounding, ...others] = readSoundings(fixture(`${name}.bufr`), {})
    expect(others).toEqual([])
    expect(brokenPromises(sounding)).toEqual([])
    expect(sounding.name).toBe('70026 2010-05-31T23:03Z')
    expect(sounding.levels).toHaveLength(26)
    const answer = levelsAnswer(sounding.levels)
    expect(answer[0]).toMatchObject({ pressureHPa: 1009.8, windFromDeg: 20, windSpeedMs: 5.1 })
    expect(answer[0].temperatureK).toBeCloseTo(temperature, 4)
    expect(answer[0].geopotentialHeightM).toBeCloseTo(height, 2)
    expect(answer.at(-1)).toMatchObject({ pressureHPa: 9.8 })
    expect(answer.at(-1)).not.toHaveProperty('windSpeedMs')
  })

  it('keeps elapsed time and displacement', () => {
    const [{ levels }] = readSoundings(barrow, {})
    expect(levels.at(-1)?.elapsed).toBe(6438)
    expect(levels[10].displacement?.latitude).toBeCloseTo(0.0123 * DEGREE, 10)
    expect(levels[10].displacement?.longitude).toBeCloseTo(-0.0123 * DEGREE, 10)
  })

  it('gives every subset of a compressed message', () => {
    const soundings = readSoundings(compressed, {})
    expect(soundings.map(({ name }) => name)).toEqual([
      '70026 2010-05-31T11:03Z',
      '70027 2010-05-31T17:03Z',
      '70028 2010-05-31T23:03Z',
    ])
    expect(soundings.map(({ levels }) => levels[3].temperature)).toEqual([
      267.55,
      undefined,
      268.55,
    ])
    expect(soundings[2].latitude).toBeCloseTo(69.25 * DEGREE, 10)
  })

  it('takes wind components, and subsets of different length', () => {
    const [first, second] = readSoundings(fixture('operators.bufr'), {})
    expect(first.levels).toHaveLength(3)
    expect(second.levels).toHaveLength(2)
    expect(second.levels[1].windEast).toBeCloseTo(-7.7, 10)
    expect(second.levels[1].windNorth).toBeCloseTo(8.8, 10)
  })

  it('gives every message of a file with bulletin headings between, and drops those it cannot read', () => {
    const heading = Buffer.from('\x01\r\r\n123\r\r\nIUKA01 PAWU 010000\r\r\n')
    const cut = barrow.subarray(0, 300)
    const soundings = readSoundings(
      Buffer.concat([heading, barrow, heading, cut, heading, compressed, giles]),
      {},
    )
    expect(soundings).toHaveLength(4)
    expect(soundings[0].notes.map(({ message }) => message)).toEqual([
      'BUFR message dropped: message does not end where it says (message 2)',
      expect.stringContaining('sounding dropped: message 4: 1 level with wind') as string,
    ])
  })

  it.each([
    [
      'a wrong edition',
      (bytes: Buffer) => bytes.fill(1, 7, 8),
      'BUFR edition 1; editions 2, 3 and 4',
    ],
    [
      'an unknown sequence',
      (bytes: Buffer) => bytes.fill(0xff, 37, 39),
      'sequence 3 63 255 is not known',
    ],
    ['another master table', (bytes: Buffer) => bytes.fill(10, 11, 12), 'not of meteorology'],
    [
      'its end gone',
      (bytes: Buffer) => bytes.fill(0, bytes.length - 4),
      'does not end where it says',
    ],
    ['its second half gone', (bytes: Buffer) => bytes.subarray(0, 300), 'message cut short'],
  ])('is refused with %s', (_, change, reason) => {
    const refused = refusalOf(new Uint8Array(change(Buffer.from(barrow))))
    expect(refused.unparseable).toBe(true)
    expect(refused.problems[0].message).toContain(reason)
  })

  it('is refused when asked for where there is none', () => {
    expect(refusalOf(new Uint8Array([1, 2, 3]), { format: 'bufr' }).problems[0].message).toBe(
      'no sounding in BUFR: no message',
    )
  })

  it('does not loop over replications of nothing', () => {
    const bomb = message(
      [112_000, 31_002, ...Array<number>(12).fill(201_129)],
      65_535,
      Buffer.alloc(200_000, 0xff),
    )
    const start = performance.now()
    expect(refusalOf(bomb).problems[0].message).toContain('more values')
    expect(performance.now() - start).toBeLessThan(5000)
  })

  it('gives up on a file of beginnings', () => {
    const start = performance.now()
    expect(refusalOf(Buffer.from('BUFR\0\0\x20\x04'.repeat(500_000))).unparseable).toBe(true)
    expect(performance.now() - start).toBeLessThan(3000)
  })

  it('is soundings or refused, whatever bytes are altered', () => {
    const files = [
      giles,
      barrow,
      compressed,
      fixture('operators.bufr'),
      fixture('barrow-309007-edition3.bufr'),
    ]
    const edits = fc.array(fc.tuple(fc.nat(), fc.nat(255)), { maxLength: 6 })
    let flyable = 0
    fc.assert(
      fc.property(fc.constantFrom(...files), edits, fc.boolean(), (file, changes, head) => {
        const bytes = Uint8Array.from(file)
        for (const [index, byte] of changes) bytes[index % (head ? 60 : bytes.length)] = byte
        try {
          for (const sounding of readSoundings(bytes, { format: 'bufr' })) {
            expect(brokenPromises(sounding)).toEqual([])
            flyable++
          }
        } catch (error) {
          if (!(error instanceof BadSounding)) throw error
        }
      }),
      { numRuns: 1500 },
    )
    expect(flyable).toBeGreaterThan(100)
  })
})

describe('sections', () => {
  it('are taken apart in edition 3 too', () => {
    const [message] = bufrMessages(fixture('barrow-309007-edition3.bufr'))
    if (message instanceof BufrError) throw message
    expect(message).toMatchObject({
      edition: 3,
      dataCategory: 2,
      subsets: 1,
      compressed: false,
      descriptors: [309_007],
      time: Date.UTC(2010, 4, 31, 23, 0) / 1000,
    })
  })
})

/** An edition 4 message of some descriptors over some data. */
function message(descriptors: readonly number[], subsets: number, data: Buffer): Uint8Array {
  const packed = descriptors.flatMap((descriptor) => {
    const kind = Math.floor(descriptor / 100_000)
    const group = Math.floor(descriptor / 1000) % 100
    return [(kind << 6) + group, descriptor % 1000]
  })
  const three = (length: number) => [length >> 16, (length >> 8) & 0xff, length & 0xff]
  const first = [...three(22), 0, 0, 0, 0, 0, 0, 0, 2, 4, 0, 31, 0, 0x07, 0xda, 5, 31, 23, 0, 0]
  const third = [...three(7 + packed.length), 0, subsets >> 8, subsets & 0xff, 0x80, ...packed]
  const fourth = [...three(4 + data.length), 0]
  const length = 8 + first.length + third.length + fourth.length + data.length + 4
  return Buffer.concat([
    Buffer.from('BUFR'),
    Buffer.from([...three(length), 4, ...first, ...third, ...fourth]),
    data,
    Buffer.from('7777'),
  ])
}
