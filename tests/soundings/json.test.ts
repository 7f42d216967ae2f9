import { describe, expect, it } from 'vitest'
import { z } from 'zod'
import { profileSchema } from '../../src/soundings/json.ts'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { brokenPromises, fixture, readOne, refusalOf } from './samples.ts'

const profile = {
  name: 'Lake in the morning',
  validAt: '2026-12-05T07:00:00+01:00',
  latitudeDeg: 47.05,
  longitudeDeg: 8.31,
  levels: [
    {
      pressureHPa: 960,
      geopotentialHeightM: 450,
      temperatureK: 280,
      dewPointK: 276,
      windFromDeg: 270,
      windSpeedMs: 4,
    },
    {
      pressureHPa: 850,
      temperatureK: 274,
      relativeHumidityPercent: 50,
      windFromDeg: 280,
      windSpeedMs: 9,
      elapsedS: 180,
    },
    { altitudeM: 5000, temperatureK: 250 },
    { pressureHPa: 300, windFromDeg: 0, windSpeedMs: 30 },
  ],
}
const levels = profile.levels

describe('a profile in JSON', () => {
  const read = readOne(profile)

  it('keeps its name, time and position', () => {
    expect(read.name).toBe('Lake in the morning')
    expect(read.validAt).toBe(Date.UTC(2026, 11, 5, 6) / 1000)
    expect(read.latitude).toBeCloseTo((47.05 * Math.PI) / 180, 12)
    expect(read.longitude).toBeCloseTo((8.31 * Math.PI) / 180, 12)
  })

  it('is completed, with notes that point to the levels', () => {
    expect(brokenPromises(read)).toEqual([])
    expect(read.levels).toHaveLength(4)
    expect(read.notes).toEqual([
      { path: '/levels/1', message: 'height completed with the hypsometric equation (/levels/1)' },
      {
        path: '/levels/2',
        message: 'pressure completed with the hypsometric equation (/levels/2)',
      },
      {
        path: '/levels/3',
        message: 'height completed with the thickness of the standard atmosphere (/levels/3)',
      },
    ])
  })

  it('takes name and time from the sender where they are given', () => {
    expect(readOne(profile, { name: 'Other', validAt: 0 })).toMatchObject({
      name: 'Other',
      validAt: 0,
    })
    const nameless = readOne({ levels })
    expect(nameless).toMatchObject({
      name: 'Sounding',
      validAt: null,
      latitude: null,
      longitude: null,
    })
  })

  it('has altitudes geometric and heights geopotential', () => {
    // US Standard Atmosphere 1976, table I: 5000 m geometric is 4996 m geopotential
    expect(read.levels[2].geopotentialHeight).toBeCloseTo(4996, 0)
  })

  it.each([
    ['an unknown member', { ...profile, station: 'x' }, ''],
    ['an unknown member of a level', { levels: [{ ...levels[0], u: 1 }, levels[1]] }, '/levels/0'],
    [
      'a text for a number',
      { levels: [levels[0], { ...levels[1], windSpeedMs: '9' }] },
      '/levels/1/windSpeedMs',
    ],
    ['a level that is none', { levels: [levels[0], 7] }, '/levels/1'],
    ['no levels', { name: 'x' }, '/levels'],
    ['a time without a zone', { ...profile, validAt: '2026-12-05T07:00:00' }, '/validAt'],
    ['a latitude beyond the pole', { ...profile, latitudeDeg: 90.5 }, '/latitudeDeg'],
    ['a latitude without a longitude', { levels, latitudeDeg: 47 }, '/longitudeDeg'],
    ['an array', [profile], ''],
    ['an empty name', { ...profile, name: ' ' }, '/name'],
  ])('is refused with %s, by path', (_, content, path) => {
    const refused = refusalOf(content)
    expect(refused.unparseable).toBe(true)
    expect(refused.problems[0].path).toBe(path)
  })

  it.each(['{', '{"levels": [', '{"levels": [{"pressureHPa": NaN}]}', '{} {}', '['.repeat(1e6)])(
    'is refused where it is no JSON: %s',
    (text) => {
      expect(refusalOf(text).unparseable).toBe(true)
    },
  )

  it('is refused with numbers beyond all numbers', () => {
    const text = JSON.stringify(profile).replace('960', '1e999')
    expect(refusalOf(text).problems[0].path).toBe('/levels/0/pressureHPa')
  })

  it('tells twenty problems at most, however many there are', () => {
    const many = refusalOf({ levels: Array.from({ length: 50_000 }, () => ({ nonsense: 1 })) })
    expect(many.problems).toHaveLength(20)
    const levels = Array.from({ length: 100_001 }, () => ({}))
    expect(refusalOf({ levels }).problems).toHaveLength(1)
  })

  it('has a schema for the API description with a description of every member', () => {
    const schema = z.toJSONSchema(profileSchema, { io: 'input' })
    const items = (schema.properties?.levels as { items: z.core.JSONSchema.JSONSchema }).items
    const members = [
      ...Object.values(schema.properties ?? {}),
      ...Object.values(items.properties ?? {}),
    ]
    expect(members).toHaveLength(14)
    for (const member of members) expect(member).toHaveProperty('description')
    expect(items.additionalProperties).toBe(false)
  })
})

describe('what cannot be flown in', () => {
  const change = (index: number, part: object) =>
    refusalOf({ levels: levels.map((level, i) => (i === index ? { ...level, ...part } : level)) })

  it.each([
    [
      1,
      { temperatureK: 20 },
      '/levels/1/temperatureK',
      'temperature 20 K: from 150 to 350 K can be flown in',
    ],
    [
      1,
      { temperatureK: 350.1 },
      '/levels/1/temperatureK',
      'temperature 350.1 K: from 150 to 350 K can be flown in',
    ],
    [
      3,
      { windSpeedMs: 151 },
      '/levels/3/windSpeedMs',
      'wind speed 151 m/s: from 0 to 150 m/s can be flown in',
    ],
    [
      3,
      { windSpeedMs: -1 },
      '/levels/3/windSpeedMs',
      'wind speed -1 m/s: from 0 to 150 m/s can be flown in',
    ],
    [
      3,
      { windFromDeg: 361 },
      '/levels/3/windFromDeg',
      'wind direction 361 °: from 0 to 360 ° can be flown in',
    ],
    [
      0,
      { pressureHPa: 96_000 },
      '/levels/0/pressureHPa',
      'pressure 96000 hPa: from 0.01 to 1100 hPa can be flown in',
    ],
    [
      0,
      { pressureHPa: 0 },
      '/levels/0/pressureHPa',
      'pressure 0 hPa: from 0.01 to 1100 hPa can be flown in',
    ],
    [
      2,
      { altitudeM: 5e6 },
      '/levels/2/altitudeM',
      'altitude 5000000 m: from -1000 to 100000 m can be flown in',
    ],
    [
      1,
      { pressureHPa: 970, geopotentialHeightM: 1500 },
      '/levels/1/pressureHPa',
      'pressure rises with height: 960 hPa at 450 m, 970 hPa above it at 1500 m; below 960 hPa can be flown in',
    ],
  ])('level %i with %j', (index, part, path, message) => {
    const refused = change(index, part)
    expect(refused.unparseable).toBe(false)
    expect(refused.problems).toEqual([{ path, message }])
  })

  it('fewer than two winds', () => {
    const refused = refusalOf({ levels: [levels[0], levels[2]] })
    expect(refused.unparseable).toBe(false)
    expect(refused.problems).toEqual([
      {
        path: '/levels',
        message:
          '1 level with wind: 2 or more can be flown in, each with wind direction and speed and with a pressure or a height',
      },
    ])
    expect(refusalOf({ levels: [] }).problems[0].message).toContain('no levels with wind')
  })

  it('one temperature', () => {
    const refused = refusalOf({ levels: [levels[0], levels[3]] })
    expect(refused.unparseable).toBe(false)
    expect(refused.problems[0].message).toContain('1 level with a temperature: 2 or more')
  })

  it('heights that no air between the levels could have', () => {
    const refused = refusalOf({
      levels: [
        { pressureHPa: 1000, temperatureK: 280, windFromDeg: 1, windSpeedMs: 1 },
        { ...levels[1], pressureHPa: 1, geopotentialHeightM: 100 },
      ],
    })
    expect(refused.problems[0].path).toBe('/levels/0/geopotentialHeightM')
  })
})

describe('the same profile in JSON and CSV', () => {
  const norman = readOne(new TextDecoder().decode(fixture('sounding-norman-2023-05-22.csv')))
  const answer = levelsAnswer(norman.levels)

  it('comes back from JSON as it was', () => {
    const back = readOne({ levels: answer.map((level) => ({ ...level, altitudeM: undefined })) })
    expect(back.levels).toHaveLength(256)
    expect(levelsAnswer(back.levels)).toEqual(answer)
  })

  it.each([
    [
      'pressure_Pa',
      100,
      'altitude_km',
      1e-3,
      'temperature_F',
      (k: number) => (k - 273.15) * 1.8 + 32,
      'wind speed_kt',
      3600 / 1852,
    ],
    [
      'pressure_kPa',
      0.1,
      'altitude_ft',
      1 / 0.3048,
      'temperature_K',
      (k: number) => k,
      'wind speed_km/h',
      3.6,
    ],
    [
      'pressure_mbar',
      1,
      'altitude_m',
      1,
      'temperature_C',
      (k: number) => k - 273.15,
      'wind speed_m/s',
      1,
    ],
  ])(
    'comes back from CSV in %s, %s × …',
    (pressure, perHPa, altitude, perM, temperature, fromK, speed, perMs) => {
      const head = [
        speed,
        temperature,
        altitude,
        `dew point ${temperature}`,
        'wind direction_deg',
        pressure,
      ]
      const cell = (value: number | undefined, unit: (value: number) => number) =>
        value === undefined ? '' : unit(value)
      const rows = answer.map((level) =>
        [
          cell(level.windSpeedMs, (v) => v * perMs),
          cell(level.temperatureK, fromK),
          level.altitudeM * perM,
          cell(level.dewPointK, fromK),
          cell(level.windFromDeg, (v) => v),
          cell(level.pressureHPa, (v) => v * perHPa),
        ].join(','),
      )
      const back = levelsAnswer(readOne([head.join(','), ...rows].join('\n')).levels)
      expect(back).toHaveLength(256)
      for (const [index, level] of back.entries()) {
        const expected = answer[index]
        for (const key of Object.keys(expected) as (keyof typeof expected)[]) {
          expect(level[key], `${key} of level ${index}`).toBeCloseTo(expected[key] ?? NaN, 2)
        }
      }
    },
  )
})
