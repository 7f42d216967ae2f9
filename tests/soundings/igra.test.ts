import { describe, expect, it } from 'vitest'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { brokenPromises, bytesOf, fixture, readOne, refusalOf } from './samples.ts'

const DEGREE = Math.PI / 180
const barrow = fixture('igra2-point-barrow-2010-06-01.txt')
const text = new TextDecoder().decode(barrow)

/** A header as of the file's station, for a nominal hour and a release time. */
function sounding(date: string, hour: string, release: string, levels: readonly string[]): string {
  const head = `#USM00070026 ${date} ${hour} ${release} ${String(levels.length).padStart(4)} ncdc6301 ncdc6301  712889 -1567833`
  return [head, ...levels, ''].join('\n')
}
const two = [
  '21     0 100980B   12     0B 1000     0    20    51 ',
  '10   242  92500   712B  -12B  954     7    41    26 ',
]

describe('a real IGRA file (expected values read off it)', () => {
  const [read, ...others] = readSoundings(barrow, {})

  it('is one sounding that keeps the promises of a sounding', () => {
    expect(others).toEqual([])
    expect(brokenPromises(read)).toEqual([])
  })

  it('is named by station and release, which came before the nominal hour on the day before', () => {
    expect(read.name).toBe('USM00070026 2010-05-31T23:03Z')
    expect(read.validAt).toBe(Date.UTC(2010, 4, 31, 23, 3) / 1000)
    expect(read.latitude).toBeCloseTo(71.2889 * DEGREE, 12)
    expect(read.longitude).toBeCloseTo(-156.7833 * DEGREE, 12)
  })

  it('has every one of the 158 levels, temperatures at 58, wind at 154', () => {
    expect(read.levels).toHaveLength(158)
    expect(read.levels.filter((level) => level.temperature !== undefined)).toHaveLength(58)
    expect(read.levels.filter((level) => level.windEast !== undefined)).toHaveLength(154)
    expect(read.notes).toEqual([])
  })

  it('has the surface level as reported', () => {
    const [surface] = read.levels
    expect(surface).toMatchObject({ geopotentialHeight: 12, pressure: 100_980, elapsed: 0 })
    expect(surface.temperature).toBeCloseTo(273.15, 10)
    expect(surface.vapourPressure).toBeCloseTo(611.2, 6) // dew point 0 °C
    expect(surface.windEast).toBeCloseTo(-5.1 * Math.sin(20 * DEGREE), 10)
    expect(surface.windNorth).toBeCloseTo(-5.1 * Math.cos(20 * DEGREE), 10)
  })

  it('has the 500 hPa level as reported, with the elapsed time 19 min 36 s', () => {
    const level = read.levels.find(({ pressure }) => pressure === 50_000)
    expect(level).toMatchObject({ geopotentialHeight: 5420, elapsed: 19 * 60 + 36 })
    expect(level?.temperature).toBeCloseTo(245.95, 10)
  })

  it('has the top level, elapsed 107 min 18 s, without wind, below none', () => {
    const top = read.levels.at(-1)
    expect(top).toMatchObject({ geopotentialHeight: 31_966, pressure: 980, elapsed: 6438 })
    expect(top).not.toHaveProperty('windEast')
  })

  it('has wind-only levels between the others, without a pressure', () => {
    const level = read.levels.find(({ geopotentialHeight: height }) => height === 27_412)
    expect(level).toMatchObject({ elapsed: 95 * 60 })
    expect(level).not.toHaveProperty('pressure')
    expect(level?.windEast).toBeCloseTo(-4.1 * Math.sin(82 * DEGREE), 10)
  })
})

describe('IGRA text', () => {
  it('gives every sounding of a file', () => {
    const [first, second] = readSoundings(
      bytesOf(text + sounding('2010 06 02', '12', '1131', two)),
      {},
    )
    expect(first.levels).toHaveLength(158)
    expect(second.name).toBe('USM00070026 2010-06-02T11:31Z')
    expect(second.levels).toHaveLength(2)
  })

  it('drops a sounding that cannot be flown in, and says so with its line', () => {
    const soundings = readSoundings(
      bytesOf(sounding('2010 06 02', '12', '1131', [two[0]]) + text),
      {},
    )
    expect(soundings).toHaveLength(1)
    expect(soundings[0].notes).toHaveLength(1)
    expect(soundings[0].notes[0].line).toBe(1)
    expect(soundings[0].notes[0].message).toContain('sounding dropped: line 1: 1 level with wind')
  })

  it('is refused where no sounding is left', () => {
    const refused = refusalOf(sounding('2010 06 02', '12', '1131', [two[0]]))
    expect(refused.unparseable).toBe(false)
    expect(refused.problems[0]).toMatchObject({ line: 1 })
  })

  it.each([
    ['2010 06 01', '00', '2303', '2010-05-31T23:03:00.000Z'],
    ['2010 06 01', '12', '1059', '2010-06-01T10:59:00.000Z'],
    ['2010 06 01', '00', '0030', '2010-06-01T00:30:00.000Z'],
    ['2010 06 01', '23', '0010', '2010-06-02T00:10:00.000Z'],
    ['2010 06 01', '12', '9999', '2010-06-01T12:00:00.000Z'],
    ['2010 06 01', '12', '1199', '2010-06-01T11:00:00.000Z'],
    ['2010 06 01', '99', '1131', '2010-06-01T11:31:00.000Z'],
  ])('takes %s nominal hour %s released %s to be %s', (date, hour, release, expected) => {
    const { validAt } = readOne(sounding(date, hour, release, two))
    expect(new Date((validAt ?? 0) * 1000).toISOString()).toBe(expected)
  })

  it('knows no time where neither hour nor release is told', () => {
    expect(readOne(sounding('2010 06 01', '99', '9999', two)).validAt).toBeNull()
  })

  it('knows no position of a mobile station', () => {
    const mobile = sounding('2010 06 01', '12', '9999', two).replace(
      ' 712889 -1567833',
      '-988888 -9988888',
    )
    expect(readOne(mobile)).toMatchObject({ latitude: null, longitude: null })
  })

  it('drops what quality control removed and lines cut short or long, by line', () => {
    const { levels, notes } = readOne(
      sounding('2010 06 01', '12', '1131', [
        ...two,
        '20 -9999  90000   950 -8888 -9999 -9999    50    30 ',
        '10   518  85000  1383B  -35B  946     8    64    21 trailing',
        '10   518  8',
      ]),
    )
    expect(levels).toHaveLength(3)
    expect(levels[2]).not.toHaveProperty('temperature')
    expect(notes).toEqual([
      { line: 5, message: 'line dropped: no level can be read from it (2 times: lines 5, 6)' },
    ])
  })

  it('is read with CRLF line ends too', () => {
    const [read] = readSoundings(bytesOf(text.replaceAll('\n', '\r\n')), {})
    expect(read.levels).toHaveLength(158)
  })
})
