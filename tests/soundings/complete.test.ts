import { describe, expect, it } from 'vitest'
import { standardLayers } from '../../src/physics/standardAtmosphere.ts'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { brokenPromises, readOne } from './samples.ts'

const wind = { windFromDeg: 270, windSpeedMs: 10 }
const ground = { pressureHPa: 1000, geopotentialHeightM: 100, temperatureK: 290, ...wind }
const messages = (sounding: { notes: { message: string }[] }) =>
  sounding.notes.map(({ message }) => message)

describe('completing heights and pressures', () => {
  it('takes the thickness of isothermal dry air from the hypsometric equation', () => {
    // Rd·T/g0·ln 2 with Rd = 287.05287, T = 250 K, g0 = 9.80665: 5072.32 m
    const { levels } = readOne({
      levels: [
        { ...ground, temperatureK: 250 },
        { pressureHPa: 500, temperatureK: 250, ...wind },
      ],
    })
    expect(levels[1].geopotentialHeight).toBeCloseTo(100 + 5072.32, 2)
  })

  it('makes humid air thicker than dry air', () => {
    const thickness = (humidity: object) => {
      const { levels } = readOne({
        levels: [
          { ...ground, ...humidity },
          { pressureHPa: 900, temperatureK: 285, ...humidity, ...wind },
        ],
      })
      return levels[1].geopotentialHeight - levels[0].geopotentialHeight
    }
    // Tv/T = 1/(1 − 0.378·e/p): e/p is 1.9 % below and 1.5 % above, so Tv is 0.65 % more
    expect(thickness({ relativeHumidityPercent: 100 }) / thickness({})).toBeCloseTo(1.0065, 3)
  })

  it('fits levels between two reported heights to both', () => {
    const { levels } = readOne({
      levels: [
        ground,
        { pressureHPa: 900, temperatureK: 285 },
        { pressureHPa: 500, temperatureK: 255, geopotentialHeightM: 5700, ...wind },
      ],
    })
    expect(levels[1].geopotentialHeight).toBeGreaterThan(900)
    expect(levels[1].geopotentialHeight).toBeLessThan(1020)
    expect(levels[2].geopotentialHeight).toBe(5700)
  })

  it('completes downwards too', () => {
    const isothermal = { temperatureK: 250, ...wind }
    const { levels } = readOne({
      levels: [
        { pressureHPa: 1000, ...isothermal },
        { pressureHPa: 500, geopotentialHeightM: 5172.32, ...isothermal },
      ],
    })
    expect(levels[0].geopotentialHeight).toBeCloseTo(100, 2)
  })

  it('takes pressures from heights by the same equation', () => {
    const isothermal = { temperatureK: 250, ...wind }
    const { levels, notes } = readOne({
      levels: [
        { ...ground, temperatureK: 250 },
        { geopotentialHeightM: 5172.32, ...isothermal },
        { geopotentialHeightM: -100, ...isothermal },
      ],
    })
    expect(levels[2].pressure).toBeCloseTo(50_000, 0)
    expect(levels[0].pressure).toBeCloseTo(100_000 * 2 ** (200 / 5072.32), 0)
    expect(notes[0].message).toBe(
      'pressure completed with the hypsometric equation (2 times: /levels/2, /levels/1)',
    )
  })

  it('puts a sounding that tells no height where the standard atmosphere has its lowest pressure', () => {
    const sounding = readOne({
      levels: [
        { pressureHPa: 898.746, temperatureK: 280, ...wind },
        { pressureHPa: 500, temperatureK: 255, ...wind },
      ],
    })
    expect(sounding.levels[0].geopotentialHeight).toBeCloseTo(1000, 1) // US Standard Atmosphere 1976, table II
    expect(messages(sounding)[0]).toContain('no level tells a height beside its pressure')
  })

  it('interpolates wind levels in ln p', () => {
    const sounding = readOne({
      levels: [
        ground,
        { pressureHPa: Math.sqrt(1000 * 250), ...wind },
        { pressureHPa: 250, temperatureK: 230, geopotentialHeightM: 10_100 },
      ],
    })
    expect(sounding.levels[1].geopotentialHeight).toBeCloseTo(5100, 6)
    expect(messages(sounding)).toEqual([
      'height interpolated in ln p between the neighbouring levels (/levels/1)',
    ])
  })

  it('puts wind-only levels at the heights of the standard atmosphere, and says so', () => {
    const sounding = readOne({
      levels: [
        { pressureHPa: 850, ...wind },
        { pressureHPa: 300, ...wind },
      ],
    })
    expect(sounding.levels[0].geopotentialHeight).toBeCloseTo(1457, 0) // US Standard Atmosphere 1976, table III
    expect(sounding.levels[1].geopotentialHeight).toBeCloseTo(9164, 0)
    expect(messages(sounding)).toContain(
      'no temperatures: flown in with those of the standard atmosphere',
    )
  })

  it('gets the standard atmosphere back from its temperatures, within 0.2 m and 2e-5 of the pressure', () => {
    const heights = Array.from({ length: 161 }, (_, index) => index * 200)
    const level = (height: number) => ({
      temperatureK: standardLayers.temperature(height),
      ...wind,
    })
    const byPressure = readOne({
      levels: heights.map((height) => ({
        ...level(height),
        pressureHPa: standardLayers.pressure(height) / 100,
        ...(height === 0 ? { geopotentialHeightM: 0 } : {}),
      })),
    })
    const byHeight = readOne({
      levels: heights.map((height) => ({
        ...level(height),
        geopotentialHeightM: height,
        ...(height === 0 ? { pressureHPa: 1013.25 } : {}),
      })),
    })
    for (const [index, height] of heights.entries()) {
      expect(Math.abs(byPressure.levels[index].geopotentialHeight - height)).toBeLessThan(0.2)
      const pressure = byHeight.levels[index].pressure ?? NaN
      expect(Math.abs(pressure / standardLayers.pressure(height) - 1)).toBeLessThan(2e-5)
    }
  })
})

describe('sorting and merging levels', () => {
  it('joins temperature and wind reported apart at one pressure or one height', () => {
    const { levels, notes } = readOne({
      levels: [
        { pressureHPa: 850, geopotentialHeightM: 1500, temperatureK: 280 },
        ground,
        { pressureHPa: 850, ...wind },
        { geopotentialHeightM: 3000, ...wind },
        { geopotentialHeightM: 3000, pressureHPa: 700, temperatureK: 270 },
      ],
    })
    expect(levels).toHaveLength(3)
    for (const level of levels)
      expect(level).toMatchObject({ temperature: expect.any(Number) as number, windEast: 10 })
    expect(notes).toEqual([])
  })

  it('takes the first of repeated levels, with a note', () => {
    const { levels, notes } = readOne({
      levels: [
        ground,
        ground,
        { pressureHPa: 500, temperatureK: 255, ...wind },
        { pressureHPa: 500, temperatureK: 256 },
      ],
    })
    expect(levels).toHaveLength(2)
    expect(levels[1].temperature).toBe(255)
    expect(notes[0].message).toContain(
      'repeats another level: what both tell taken from the first (2 times',
    )
  })

  it('drops levels that say nothing or not where', () => {
    const { levels, notes } = readOne({
      levels: [
        ground,
        { temperatureK: 280, ...wind },
        { pressureHPa: 800 },
        {},
        { pressureHPa: 500, temperatureK: 255, ...wind },
      ],
    })
    expect(levels).toHaveLength(2)
    expect(notes.slice(0, 2)).toEqual([
      {
        path: '/levels/1',
        message: 'level with neither pressure nor height dropped (2 times: /levels/1, /levels/3)',
      },
      { path: '/levels/2', message: 'level with neither temperature nor wind dropped (/levels/2)' },
    ])
  })

  it('completes pressures that stand still for their rounding, and so falls strictly', () => {
    const high = [10, 10, 10, 9.9, 9.9, 9.8].map((pressureHPa, index) => ({
      pressureHPa,
      geopotentialHeightM: 31_000 + 20 * index,
      temperatureK: 230,
      ...wind,
    }))
    const sounding = readOne({ levels: [ground, ...high] })
    expect(brokenPromises(sounding)).toEqual([])
    expect(sounding.levels.map(({ temperature }) => temperature)).toEqual([
      290, 230, 230, 230, 230, 230, 230,
    ])
    expect(sounding.levels[2].pressure).toBeCloseTo(1000 * 0.99 ** (20 / 60), 3)
    expect(messages(sounding)[0]).toContain(
      'pressure not below that of the level beneath set aside (3 times',
    )
  })

  it('drops what was reported after the highest level', () => {
    const level = (elapsedS: number, geopotentialHeightM: number) => ({
      elapsedS,
      geopotentialHeightM,
      ...wind,
    })
    const up = [level(0, 100), level(1000, 5000), level(2000, 10_000)]
    const flown = readOne({ levels: [...up, level(2100, 8000), level(2400, 3000)] })
    expect(flown.levels.map(({ elapsed }) => elapsed)).toEqual([0, 1000, 2000])
    expect(messages(flown)[0]).toBe('level of the descent dropped (2 times: /levels/3, /levels/4)')
    const dropped = readOne({ levels: [level(0, 10_000), level(300, 5000), level(700, 100)] })
    expect(dropped.levels.map(({ elapsed }) => elapsed)).toEqual([700, 300, 0])
  })
})

describe('humidity and wind', () => {
  const second = { pressureHPa: 500, temperatureK: 255, ...wind }

  it('takes the dew point before the relative humidity, and neither without a temperature', () => {
    const { levels, notes } = readOne({
      levels: [
        { ...ground, dewPointK: 273.15, relativeHumidityPercent: 99 },
        { ...second, relativeHumidityPercent: 50 },
        { pressureHPa: 300, ...wind, dewPointK: 240 },
      ],
    })
    expect(levels[0].vapourPressure).toBeCloseTo(611.2, 6)
    expect(levelsAnswer(levels)[1].relativeHumidityPercent).toBeCloseTo(50, 3)
    expect(levels[2]).not.toHaveProperty('vapourPressure')
    expect(notes[0].message).toBe('humidity without a temperature dropped (/levels/2)')
  })

  it('limits a dew point to the temperature and a humidity to saturation', () => {
    const sounding = readOne({
      levels: [
        { ...ground, dewPointK: 291 },
        { ...second, relativeHumidityPercent: 104 },
        { ...second, pressureHPa: 300, relativeHumidityPercent: 300 },
      ],
    })
    const answer = levelsAnswer(sounding.levels)
    expect(answer[0].dewPointK).toBeCloseTo(290, 3)
    expect(answer[1].relativeHumidityPercent).toBe(100)
    expect(answer[2]).not.toHaveProperty('relativeHumidityPercent')
    expect(messages(sounding).slice(0, 3)).toEqual([
      'dew point above the temperature limited to it (/levels/0)',
      'relative humidity above 100 % limited to it (/levels/1)',
      'relative humidity outside 0 to 110 % dropped (/levels/2)',
    ])
  })

  it('drops more vapour than air can hold', () => {
    const sounding = readOne({
      levels: [
        ground,
        { ...second, pressureHPa: 5, temperatureK: 330, relativeHumidityPercent: 90 },
      ],
    })
    expect(brokenPromises(sounding)).toEqual([])
    expect(messages(sounding)).toContain(
      'humidity dropped: more vapour than any air holds (/levels/1)',
    )
  })

  it('takes a calm without a direction for a wind, and drops half a wind', () => {
    const { levels, notes } = readOne({
      levels: [
        ground,
        { ...second, windFromDeg: undefined, windSpeedMs: 0 },
        { pressureHPa: 400, temperatureK: 245, windSpeedMs: 5 },
        { pressureHPa: 300, temperatureK: 235, windFromDeg: 5 },
      ],
    })
    expect(levels[1]).toMatchObject({ windEast: 0, windNorth: 0 })
    expect(levels.filter((level) => level.windEast !== undefined)).toHaveLength(2)
    expect(notes.slice(0, 2).map(({ message }) => message)).toEqual([
      'wind speed without a direction dropped (/levels/2)',
      'wind direction without a speed dropped (/levels/3)',
    ])
  })
})
