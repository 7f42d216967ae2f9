import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { BadSounding } from '../../src/soundings/badSounding.ts'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { Notes } from '../../src/soundings/notes.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { readTemp } from '../../src/soundings/temp.ts'
import { type ReportedLevel } from '../../src/soundings/profile.ts'
import { brokenPromises, bytesOf, fixture, readOne, refusalOf } from './samples.ts'

const DEGREE = Math.PI / 180
const KNOT = 1852 / 3600
const jackson = new TextDecoder().decode(fixture('temp-jackson-2006-09-22.txt'))
const saoPaulo = new TextDecoder().decode(fixture('temp-sao-paulo-day-23.txt'))
const received = Date.UTC(2006, 8, 23) / 1000

function levelAt(levels: readonly ReportedLevel[], hectopascal: number): ReportedLevel {
  const level = levels.find(({ pressure }) => Math.abs((pressure ?? 0) - hectopascal * 100) < 1e-6)
  if (!level) throw new Error(`no level at ${hectopascal} hPa`)
  return level
}

/** Height m, temperature and dew point depression °C, direction °, speed in the report's unit. */
type Figure = number | undefined
type Expected = [number, Figure?, Figure?, Figure?, Figure?, Figure?]

function expectLevels(
  levels: readonly ReportedLevel[],
  expected: readonly Expected[],
  speedUnit: number,
) {
  for (const [pressure, height, celsius, depression, direction, speed] of expected) {
    const level = levelAt(levels, pressure)
    const at = `at ${pressure} hPa`
    const check = (value: number | undefined, wanted: number | undefined, what: string) => {
      if (wanted === undefined) expect(value, `${what} ${at}`).toBeUndefined()
      else expect(value, `${what} ${at}`).toBeCloseTo(wanted, 4)
    }
    check(level.geopotentialHeight, height, 'height')
    check(level.temperature, celsius === undefined ? undefined : 273.15 + celsius, 'temperature')
    const dewPoint = depression === undefined ? undefined : 273.15 + (celsius ?? NaN) - depression
    check(level.dewPoint, dewPoint, 'dew point')
    check(level.windFrom, direction === undefined ? undefined : direction * DEGREE, 'direction')
    check(level.windSpeed, speed === undefined ? undefined : speed * speedUnit, 'speed')
  }
}

describe('a real TEMP report (expected values read by hand from its groups)', () => {
  const [report, ...others] = readTemp(jackson, received, new Notes())

  it('is one sounding of parts A and B, with the month from when it came in', () => {
    expect(others).toEqual([])
    expect(report.station).toBe('72235')
    expect(report.validAt).toBe(Date.UTC(2006, 8, 22, 11, 3) / 1000) // 81103
    expect(report.levels).toHaveLength(38)
  })

  it('has the standard levels, tropopause and greatest wind of part A', () => {
    expectLevels(
      report.levels,
      [
        [1000, 89, 24.4, 1.6, 180, 6],
        [925, 772, 21.2, 0.5, 205, 40],
        [850, 1503, 17.2, 1.8, 220, 44],
        [700, 3136, 9.0, 4.0, 235, 38],
        [500, 5840, -7.1, 41, 245, 32],
        [400, 7540, -18.3, undefined, 255, 32],
        [300, 9620, -35.3, 27, 250, 47],
        [250, 10_860, -43.7, 22, 245, 60],
        [200, 12_320, -54.7, 17, 240, 69],
        [150, 14_120, -65.5, 13, 255, 67],
        [100, 16_530, -71.1, 11, 245, 43],
        [125, undefined, -71.3, 11, 250, 61],
        [182, undefined, undefined, undefined, 250, 75],
      ],
      KNOT,
    )
  })

  it('has the significant levels of part B', () => {
    expectLevels(
      report.levels,
      [
        [985, undefined, 23.6, 0.5],
        [764, undefined, 12.8, 14],
        [589, undefined, 0.2, 10],
        [585, undefined, -0.1, 6],
        [550, undefined, -3.1, 8],
        [528, undefined, -4.5, 40],
        [120, undefined, -71.5, 11],
      ],
      KNOT,
    )
  })

  it('can be flown in', () => {
    const [sounding] = readSoundings(bytesOf(jackson), { receivedAt: received })
    expect(brokenPromises(sounding)).toEqual([])
    expect(sounding.name).toBe('72235 2006-09-22T11:03Z')
    expect(levelsAnswer(sounding.levels)[0]).toMatchObject({ altitudeM: 89.001, windFromDeg: 180 })
  })
})

describe('a real TEMP report of four parts (expected values read by hand from its groups)', () => {
  const [report] = readTemp(saoPaulo, received, new Notes())

  it('is one sounding up to 28.3 hPa', () => {
    expect(report.validAt).toBe(Date.UTC(2006, 8, 23, 11, 31) / 1000)
    expectLevels(
      report.levels,
      [
        [938, undefined, 21.2, 2.4, 10, 8],
        [1000, 163],
        [850, 1570, 18.6, 5, 360, 8],
        [70, 18_650, -71.5, 18, 150, 20],
        [50, 20_640, -67.5, 24, 125, 19],
        [30, 23_800, -58.3, 33, 85, 35],
        [90.6, undefined, -77.1, 12, 260, 18],
        [28.3, undefined, -57.7, 35, 90, 41],
        [524, undefined, -4.7, 11, 0, 0],
        [93.5, undefined, undefined, undefined, 255, 16],
        [63.2, undefined, undefined, undefined, 55, 15],
      ],
      KNOT,
    )
  })

  it('starts at the ground, and the level beneath it is dropped', () => {
    const [sounding] = readSoundings(bytesOf(saoPaulo), {})
    expect(brokenPromises(sounding)).toEqual([])
    expect(sounding.levels[0].pressure).toBe(93_800)
    expect(sounding.validAt).toBeNull()
    const messages = sounding.notes.map(({ message }) => message)
    expect(messages).toContain('TEMP reports tell only day and hour: the time is not known')
    expect(messages).toContain('level below the lowest observation dropped (line 1)')
  })
})

describe('a worked example', () => {
  // Source: Lyndon State College, Atmospheric Sciences, laboratory notes "Radiosonde observations",
  // which decode day 31 at 00 UTC, station 72518, surface 1030 hPa, 85585, 70138, 50572, 40736, 30935
  // and 25054 of it.
  const albany =
    'TTAA 81001 72518 99030 08863 33004 00263 10464 34016 92904 04461 00518 85585 00079 01526 70138 04182 32526 50572 17372 31549 40736 28766 31052 30935 45763 30055 25054 55158 29568 20193 63557 28573 15371 58560 27071 10624 62164 28053 88192 64957 28579 77182 28581 41314 51515 10164 00021 10194 36018 34526='

  it('is decoded as its source does', () => {
    const [report] = readTemp(albany, Date.UTC(2020, 0, 20) / 1000, new Notes())
    expect(new Date((report.validAt ?? 0) * 1000).toISOString()).toBe('2020-01-31T00:00:00.000Z')
    const height = (pressure: number) => levelAt(report.levels, pressure).geopotentialHeight
    expect(levelAt(report.levels, 1030).windSpeed).toBeCloseTo(4 * KNOT, 4)
    expect([850, 700, 500, 400, 300, 250].map(height)).toEqual([
      1585, 3138, 5720, 7360, 9350, 10_540,
    ])
  })
})

describe('TEMP', () => {
  const body =
    '99012 12456 27005 00105 12256 27506 85500 05060 28010 70030 02161 29015 31313 00008 81130='

  it('takes wind in m/s unless 50 is added to the day', () => {
    const report = (day: string) =>
      readTemp(`TTAA ${day}127 10035 ${body}`, received, new Notes())[0]
    expect(levelAt(report('15').levels, 700).windSpeed).toBe(15)
    expect(levelAt(report('65').levels, 700).windSpeed).toBeCloseTo(15 * KNOT, 4)
    expect(report('65').validAt).toBe(Date.UTC(2006, 8, 15, 11, 30) / 1000)
  })

  it('adds to the direction and the speed beyond 100 as the groups do', () => {
    const text = `TTAA 65125 10035 99012 12456 11112 50570 20560 11612 77300 27640`
    const [{ levels }] = readTemp(text, null, new Notes())
    expectLevels(
      levels,
      [
        [1012, undefined, 12.4, 6, 110, 112],
        [500, 5700, -20.5, 10, 115, 112],
        [300, undefined, undefined, undefined, 275, 140],
      ],
      KNOT,
    )
  })

  it('takes levels above the last wind level without wind', () => {
    const text =
      'TTAA 15127 10035 99012 12456 27005 85500 05060 28010 70030 02161 29015 50570 20560 40730 30560 30920 44760 25040 52760'
    const [{ levels }] = readTemp(text, null, new Notes())
    expectLevels(
      levels,
      [
        [700, 3030, -2.1, 11, 290, 15],
        [500, 5700, -20.5, 10],
        [300, 9200, -44.7, 10],
        [250, 10_400, -52.7, 10],
      ],
      1,
    )
  })

  it('puts a 1000 hPa surface below the sea where 500 is added', () => {
    const text =
      'TTAA 15127 10035 99951 14016 22512 00578 ///// ///// 85288 08610 26028 70874 00208 25031'
    expect(levelAt(readTemp(text, null, new Notes())[0].levels, 1000).geopotentialHeight).toBe(-78)
  })

  it('reads ships, with their position', () => {
    const [ship] = readTemp(`UUAA DBLK 15127 99543 70105 21732 ${body}`, received, new Notes())
    expect(ship.station).toBe('DBLK')
    expect(ship.latitude).toBeCloseTo(54.3 * DEGREE, 10)
    expect(ship.longitude).toBeCloseTo(-10.5 * DEGREE, 10)
    expect(ship.levels).toHaveLength(4)
  })

  it('reads mobile land stations, with their height', () => {
    const [mobile] = readTemp(
      `IIAA ABC12 15127 99343 51185 37834 01501 ${body}`,
      received,
      new Notes(),
    )
    expect(mobile.latitude).toBeCloseTo(-34.3 * DEGREE, 10)
    expect(mobile.longitude).toBeCloseTo(-118.5 * DEGREE, 10)
    expect(levelAt(mobile.levels, 1012).geopotentialHeight).toBe(150)
  })

  it('reads dropsondes', () => {
    const [dropsonde] = readTemp(
      `XXAA 65128 99175 10605 08075 99008 26610 10030 00071 26010 10532 92751 22410 11040 85480 18210 12045 88999 77999`,
      received,
      new Notes(),
    )
    expect(dropsonde.latitude).toBeCloseTo(17.5 * DEGREE, 10)
    expect(levelAt(dropsonde.levels, 925).windSpeed).toBeCloseTo(40 * KNOT, 4)
  })

  it('reads several reports, and drops with a note what cannot be read', () => {
    const text = `TTAA 15127 10035 ${body}\nTTAA NIL=\nTTAA 15127 10238 ${body}\nTTBB 15128 10035 00012 12456 11980 13050 garbled 22900 09856=`
    const soundings = readSoundings(bytesOf(text), { receivedAt: received })
    expect(soundings.map(({ name }) => name)).toEqual([
      '10035 2006-09-15T11:30Z',
      '10238 2006-09-15T11:30Z',
    ])
    expect(soundings[0].levels.map(({ pressure }) => pressure)).toEqual([
      101_200, 100_000, 98_000, 90_000, 85_000, 70_000,
    ])
    expect(soundings[0].notes).toContainEqual({
      line: 4,
      message: 'group that fits nowhere skipped (line 4)',
    })
    expect(soundings[0].notes).toContainEqual({
      line: 2,
      message: 'report dropped: its heading cannot be read (line 2)',
    })
  })

  it('skips gaps of solidi', () => {
    const text =
      'TTBB 15128 10035 00012 12456 11980 13050 22/// ///// 33700 02156 21212 00012 27005 11/// ///// 22700 29015='
    const [{ levels }] = readTemp(text, null, new Notes())
    expect(levels).toHaveLength(3)
    expectLevels(
      levels,
      [
        [1012, undefined, 12.4, 6, 270, 5],
        [700, undefined, -2.1, 6, 290, 15],
      ],
      1,
    )
  })

  it('takes the month that brings a day closest to when the report came in', () => {
    const at = (iso: string) =>
      readTemp(`TTAA 31127 10035 ${body}`, Date.parse(iso) / 1000, new Notes())[0].validAt
    expect(at('2006-09-02T00:00:00Z')).toBe(Date.UTC(2006, 7, 31, 11, 30) / 1000)
    expect(at('2007-01-01T06:00:00Z')).toBe(Date.UTC(2006, 11, 31, 11, 30) / 1000)
  })

  it('is refused where there is no report', () => {
    expect(refusalOf('TTAA NIL=', { format: 'temp' }).unparseable).toBe(true)
  })

  it('takes what the sender says for the time', () => {
    expect(readOne(`TTAA 15127 10035 ${body}`, { validAt: received }).validAt).toBe(received)
  })

  it('is soundings or refused, however it is cut short or altered', () => {
    const edits = fc.array(fc.tuple(fc.nat(), fc.constantFrom(...Array.from('0123456789/= \nT'))), {
      maxLength: 12,
    })
    let flyable = 0
    fc.assert(
      fc.property(
        fc.constantFrom(jackson, saoPaulo),
        fc.nat(2000),
        edits,
        (whole, length, changes) => {
          const characters = Array.from(whole.slice(0, length))
          for (const [index, character] of changes)
            characters[index % (characters.length || 1)] = character
          try {
            for (const sounding of readSoundings(bytesOf(characters.join('')), {
              receivedAt: received,
            })) {
              expect(brokenPromises(sounding)).toEqual([])
              flyable++
            }
          } catch (error) {
            if (!(error instanceof BadSounding)) throw error
          }
        },
      ),
      { numRuns: 800 },
    )
    expect(flyable).toBeGreaterThan(100)
  })
})
