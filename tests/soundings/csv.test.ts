import { describe, expect, it } from 'vitest'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { brokenPromises, bytesOf, fixture, readOne, refusalOf } from './samples.ts'

const DEGREE = Math.PI / 180
const norman = new TextDecoder().decode(fixture('sounding-norman-2023-05-22.csv'))

describe('a real CSV file (expected values read off it)', () => {
  const read = readOne(norman)

  it('keeps the promises of a sounding, with its 256 levels, the top one without wind', () => {
    expect(brokenPromises(read)).toEqual([])
    expect(read.levels).toHaveLength(256)
    expect(read.levels.filter((level) => level.windEast !== undefined)).toHaveLength(255)
  })

  it('takes time and position from the first level', () => {
    expect(read.validAt).toBe(Date.UTC(2023, 4, 22, 11, 4) / 1000)
    expect(read.latitude).toBeCloseTo(35.18 * DEGREE, 12)
    expect(read.longitude).toBeCloseTo(-97.44 * DEGREE, 12)
  })

  it('has the 500 hPa level as written', () => {
    const level = levelsAnswer(read.levels).find(({ pressureHPa }) => pressureHPa === 500)
    expect(level).toMatchObject({
      geopotentialHeightM: 5790,
      temperatureK: 261.85, // −11.3 °C
      dewPointK: 257.05, // −16.1 °C
      windFromDeg: 230,
      windSpeedMs: 6.2,
    })
  })

  it('names the headings it did not use, and reads times without a zone as UTC', () => {
    expect(read.notes).toEqual([
      {
        line: 1,
        message:
          "headings not used: 'ice point temperature_C', 'humidity wrt ice_%', 'mixing ratio_g/kg' (line 1)",
      },
      { message: 'times without a zone read as UTC' },
    ])
  })

  it.each([
    ['a byte order mark', (text: string) => `\ufeff${text}`],
    ['CRLF', (text: string) => text.replaceAll('\n', '\r\n')],
    ['CR alone', (text: string) => text.replaceAll('\n', '\r')],
    ['semicolons', (text: string) => text.replaceAll(',', ';')],
    [
      'semicolons and decimal commas',
      (text: string) => text.replaceAll(',', ';').replace(/(\d)\.(\d)/g, '$1,$2'),
    ],
    ['tabs', (text: string) => text.replaceAll(',', '\t')],
    [
      'quoted headings',
      (text: string) => text.replace(/^.*$/m, (head) => `"${head.replaceAll(',', '","')}"`),
    ],
    [
      'blank lines and blanks round values',
      (text: string) => text.replaceAll('\n', ' \n\n').replaceAll(',', ' , '),
    ],
    ['a comment in front', (text: string) => `# a comment, with a comma\n${text}`],
  ])('reads the same with %s', (_, change) => {
    expect(readOne(change(norman)).levels).toEqual(read.levels)
  })

  it('reads the same in UTF-16', () => {
    const utf16 = Buffer.from(`\ufeff${norman}`, 'utf16le')
    expect(readSoundings(utf16, {})[0].levels).toEqual(read.levels)
  })

  it('reads the same with its lines the other way round', () => {
    const [head, ...lines] = norman.trim().split('\n')
    expect(readOne([head, ...lines.reverse()].join('\n')).levels).toEqual(read.levels)
  })
})

describe('CSV', () => {
  const rows = ['1000,100,20,180,5', '900,1000,10,200,10', '800,2000,0,220,15']
  const table = (head: string, lines = rows) => [head, ...lines].join('\n')
  const plain =
    'pressure_hPa,geopotential height_m,temperature_C,wind direction_degree,wind speed_m/s'

  it('takes wind direction as where the wind blows from', () => {
    const [level] = readOne(table(plain)).levels
    expect(level.windEast).toBeCloseTo(0, 12)
    expect(level.windNorth).toBeCloseTo(5, 12) // from the south: towards north
  })

  it('refuses a heading whose unit cannot be told, with what was understood and what can be', () => {
    const refused = refusalOf(table(plain.replace('temperature_C', 'temperature')))
    expect(refused.unparseable).toBe(true)
    expect(refused.problems[0]).toEqual({
      line: 1,
      message: "the unit of heading 'temperature' cannot be told",
    })
    expect(refused.problems[1].message).toContain(
      "headings understood here: 'pressure_hPa', 'geopotential height_m', 'wind direction_degree', 'wind speed_m/s'",
    )
    expect(refused.problems[1].message).toContain('temperature_C')
  })

  it('takes the first of two headings for one quantity, with a note', () => {
    const { levels, notes } = readOne(
      table(`${plain},wind speed_kt`, ['1000,100,20,180,5,99', '900,1000,10,200,10,99']),
    )
    expect(levels[0].windNorth).toBeCloseTo(5, 12)
    expect(notes[0].message).toContain(
      "heading 'wind speed_kt' ignored: 'wind speed_m/s' tells the same",
    )
  })

  it('takes empty cells and -9999 as missing in every unit', () => {
    const { levels } = readOne(
      table(plain, [...rows, '700,3000,-9999,-9999.0,', '600,,-9999,,-9999']),
    )
    expect(levels).toHaveLength(4)
    expect(Object.keys(levels[3])).toEqual(['geopotentialHeight', 'pressure'])
  })

  it.each(['abc', 'NaN', 'Infinity', '1e999', '0x10', '1,2', '--3', '1_000'])(
    "refuses '%s' for a number, by line and heading",
    (cell) => {
      const refused = refusalOf(table(plain, [...rows, `700,3000,"${cell}",240,20`]))
      expect(refused.unparseable).toBe(true)
      expect(refused.problems[0].line).toBe(5)
      expect(refused.problems[0].message).toContain(`'${cell}' under 'temperature_C'`)
    },
  )

  it('refuses a table without pressure, height or altitude, and text that is no table', () => {
    expect(refusalOf('temperature_C,wind speed_m/s\n1,2\n').problems[0].message).toContain(
      'no heading gives',
    )
    expect(refusalOf('Dear Sir or Madam').unparseable).toBe(true)
  })

  it('drops rows of another length by line', () => {
    const { levels, notes } = readOne(table(plain, [...rows, '700,3000,-5', '600,4000,-9,1,2,3']))
    expect(levels).toHaveLength(3)
    expect(notes).toEqual([
      { line: 5, message: 'row without 5 cells dropped (2 times: lines 5, 6)' },
    ])
  })

  it('keeps an elapsed time, and makes one of a clock', () => {
    const elapsed = readOne(
      table(
        `${plain},elapsed_s`,
        rows.map((row, index) => `${row},${index * 300}`),
      ),
    )
    expect(elapsed.levels.map((level) => level.elapsed)).toEqual([0, 300, 600])
    const clock = readOne(
      table(
        `${plain},time`,
        rows.map((row, index) => `${row},2026-12-05 09:0${5 * index}:00+01:00`).slice(0, 2),
      ),
    )
    expect(clock.levels.map((level) => level.elapsed)).toEqual([0, 300])
    expect(clock.validAt).toBe(Date.UTC(2026, 11, 5, 8, 0) / 1000)
  })

  it('refuses a latitude beyond the pole and a time that is none', () => {
    const head = `${plain},latitude,longitude,time`
    const refused = refusalOf(
      table(head, [
        '1000,100,20,180,5,91,8,2026-12-05T09:00:00Z',
        '900,1000,10,200,10,47,8,2026-02-30T09:00:00Z',
      ]),
    )
    expect(refused.problems.map(({ line }) => line)).toEqual([2, 3])
  })

  it('takes a position given to 360° east', () => {
    const { longitude } = readOne(
      table(
        `${plain},lat,lon`,
        rows.map((row) => `${row},47,350`),
      ),
    )
    expect(longitude).toBeCloseTo(-10 * DEGREE, 12)
  })

  it('is refused with unclosed quotes, endless lines and more levels than any sonde reports', () => {
    expect(refusalOf(`${table(plain)}\n"700,3000`).unparseable).toBe(true)
    expect(refusalOf(`${plain}\n${'1'.repeat(30_000)}`).problems[0].message).toContain(
      '20000 characters',
    )
    expect(
      refusalOf(bytesOf(`${plain}\n${'1,1,1,1,1\n'.repeat(100_001)}`)).problems[0].message,
    ).toContain('more than 100000 levels')
  })
})
