import { describe, expect, it } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { geometricAltitude } from '../../src/physics/earth.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { levelsAnswer, summary } from '../../src/soundings/levelsAnswer.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { fixture } from './samples.ts'

const [barrow] = readSoundings(fixture('igra2-point-barrow-2010-06-01.txt'), {})
const [norman] = readSoundings(fixture('sounding-norman-2023-05-22.csv'), {})

describe('levels in the units of the API (expected values read off the files)', () => {
  it('are those of the file', () => {
    const [surface] = levelsAnswer(barrow.levels)
    expect(surface).toEqual({
      geopotentialHeightM: 12,
      altitudeM: 12,
      pressureHPa: 1009.8,
      temperatureK: 273.15,
      dewPointK: 273.15,
      relativeHumidityPercent: 100,
      windFromDeg: 20,
      windSpeedMs: 5.1,
      elapsedS: 0,
    })
  })

  it('leave out what a level does not have, and the direction of a calm is 0', () => {
    const top = levelsAnswer(norman.levels).at(-1)
    expect(top).toMatchObject({ geopotentialHeightM: 34_988, pressureHPa: 5.8 })
    expect(top).not.toHaveProperty('windSpeedMs')
    expect(levelsAnswer(norman.levels)[0]).toMatchObject({ windFromDeg: 0, windSpeedMs: 0 })
    expect(
      levelsAnswer([
        { geopotentialHeight: 0, pressure: 1e5, temperature: 280, vapourPressure: 0 },
      ])[0],
    ).toEqual({
      geopotentialHeightM: 0,
      altitudeM: 0,
      pressureHPa: 1000,
      temperatureK: 280,
      relativeHumidityPercent: 0,
    })
  })

  it('are summed up', () => {
    expect(summary(norman)).toEqual({
      temperature: { levels: 256, lowestAltitudeM: 345, highestAltitudeM: 35_181.6 },
      wind: { levels: 255, lowestAltitudeM: 345, highestAltitudeM: 34_938 },
    })
    const windOnly = {
      ...barrow,
      levels: barrow.levels.filter((level) => level.temperature === undefined),
    }
    expect(summary(windOnly).temperature).toEqual({
      levels: 0,
      lowestAltitudeM: null,
      highestAltitudeM: null,
    })
  })
})

describe('a real sounding as air to fly in (expected values read off the file)', () => {
  const air = new ProfileAir(barrow.levels)
  const at = (height: number) => {
    const state = emptyAirState()
    air.sampleAltitude(geometricAltitude(height), state)
    return state
  }

  it('has the reported values at a level', () => {
    const state = at(5420) // 500 hPa, −27.2 °C, 202° 15.9 m/s
    expect(state.pressure).toBeCloseTo(50_000, 4)
    expect(state.temperature).toBeCloseTo(245.95, 8)
    expect(state.windEast).toBeCloseTo(15.9 * Math.sin((22 * Math.PI) / 180), 6)
    expect(state.windNorth).toBeCloseTo(15.9 * Math.cos((22 * Math.PI) / 180), 6)
  })

  it('lies between neighbouring levels: linear in height, pressure in its logarithm', () => {
    // 300 hPa −46.4 °C at 8939 m; 295.5 hPa −46.9 °C at 9040 m; wind level 8990 m, 213° 35.5 m/s
    const state = at(8989.5)
    expect(state.temperature).toBeCloseTo(273.15 - 46.65, 6)
    expect(state.pressure).toBeCloseTo(Math.sqrt(30_000 * 29_550), 1)
    expect(Math.hypot(state.windEast, state.windNorth)).toBeCloseTo(35.5, 1)
  })

  it('has a wind-only level between temperature levels', () => {
    const state = at(27_412) // 82° 4.1 m/s
    expect(state.windEast).toBeCloseTo(-4.1 * Math.sin((82 * Math.PI) / 180), 6)
    expect(state.windNorth).toBeCloseTo(-4.1 * Math.cos((82 * Math.PI) / 180), 6)
  })

  it('was observed from the ground to the top levels', () => {
    expect(air.observed.temperature?.top).toBeCloseTo(32_127.6, 1)
    expect(air.observed.wind?.top).toBeCloseTo(geometricAltitude(31_896), 6)
  })
})
