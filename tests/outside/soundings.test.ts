import { describe, expect, it } from 'vitest'
import { dewPoint, vapourPressure } from '../../src/physics/air.ts'
import { levelsAnswer } from '../../src/soundings/levelsAnswer.ts'
import { fixture, readOne } from '../soundings/samples.ts'

const text = (name: string) => new TextDecoder().decode(fixture(name))

/** Largest of the absolute values. */
const worst = (errors: readonly number[]) => Math.max(...errors.map(Math.abs))

/**
 * Real ascents give pressure, temperature and humidity, and the heights that their own ground station
 * made of them at full resolution. Completed from the surface up out of the first three alone, the
 * heights must come out again; what differs is the rounding of pressures (0.1 hPa and 1 hPa) and
 * temperatures (0.1 K), and the levels left out of the report.
 */
describe('hypsometric heights against those reported', () => {
  it.each([
    // Source: NOAA NCEI, IGRA v2. Worst of 57 levels: 1.04 m, at 31 966 m.
    ['igra2-point-barrow-2010-06-01.txt', 57, 1.1],
    // Source: University of Wyoming archive. Worst of 255 levels: 7.64 m, at 10 512 m.
    ['sounding-norman-2023-05-22.csv', 255, 7.7],
  ])('%s: %i levels within %f m', (name, count, tolerance) => {
    const reported = levelsAnswer(readOne(text(name)).levels).filter((level) => level.pressureHPa)
    const completed = readOne({
      levels: reported.map((level, index) => ({
        ...level,
        altitudeM: undefined,
        ...(index > 0 && { geopotentialHeightM: undefined }),
      })),
    })
    const errors = completed.levels.map(
      (level, index) => level.geopotentialHeight - reported[index].geopotentialHeightM,
    )
    expect(errors).toHaveLength(count + 1)
    expect(worst(errors)).toBeGreaterThan(0.1) // the heights really were completed
    expect(worst(errors)).toBeLessThan(tolerance)
  })

  it.each([
    // Worst of 57 levels: 0.015 %, and of 255: 0.10 %.
    ['igra2-point-barrow-2010-06-01.txt', 0.00016],
    ['sounding-norman-2023-05-22.csv', 0.00105],
  ])('%s: pressures from heights within a share of %f', (name, tolerance) => {
    const reported = levelsAnswer(readOne(text(name)).levels).filter((level) => level.pressureHPa)
    const completed = readOne({
      levels: reported.map((level, index) => ({
        ...level,
        altitudeM: undefined,
        ...(index > 0 && { pressureHPa: undefined }),
      })),
    })
    const errors = completed.levels.map(
      (level, index) => (level.pressure ?? NaN) / 100 / (reported[index].pressureHPa ?? NaN) - 1,
    )
    expect(worst(errors)).toBeGreaterThan(1e-6)
    expect(worst(errors)).toBeLessThan(tolerance)
  })
})

/** Temperature, dew point (°C) and relative humidity (%) as the archive gives them. */
const humidities = text('sounding-norman-2023-05-22.csv')
  .trim()
  .split('\n')
  .slice(1)
  .map((line) => line.split(','))
  .map((cells) => ({ t: Number(cells[5]), td: Number(cells[6]), rh: Number(cells[8]) }))

/**
 * The archive gives dew point to 0.1 K and relative humidity to 1 % side by side, converted by its own
 * formula. Source of ours: WMO-No. 8, volume I, annex 4.B.
 */
describe('humidity formulas against the archive', () => {
  it('give its relative humidity from its dew point within 1 %', () => {
    const errors = humidities.map(
      ({ t, td, rh }) => (100 * vapourPressure(td + 273.15)) / vapourPressure(t + 273.15) - rh,
    )
    expect(errors).toHaveLength(256)
    expect(worst(errors)).toBeLessThan(1) // worst of 256: 0.99 %; its rounding alone makes up to 0.9 %
  })

  it('give its dew point from its relative humidity within 0.32 K, from 20 % up', () => {
    const errors = humidities
      .filter(({ rh }) => rh >= 20)
      .map(({ t, td, rh }) => dewPoint((rh / 100) * vapourPressure(t + 273.15)) - 273.15 - td)
    expect(errors.length).toBeGreaterThan(100)
    expect(worst(errors)).toBeLessThan(0.32) // half a percent of 20 % alone is 0.2 K
  })
})
