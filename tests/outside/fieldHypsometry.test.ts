// The hypsometric equation, z₂ − z₁ = (Rd·T̄v/g0)·ln(p₁/p₂) (WMO-No. 8, vol. I; any textbook of dynamic
// meteorology), against the heights that the real global forecast itself gives on its pressure levels.
import { expect, it } from 'vitest'
import { FieldAir } from '../../src/fields/fieldAir.ts'
import { fixtureBytes } from '../fields/fixture.ts'
import { fieldFolder } from '../fields/storedField.ts'

const fields = fieldFolder()
const DEGREE = Math.PI / 180

it('the thickness of every layer of a column agrees with its heights to 1 %', async () => {
  const air = new FieldAir(await fields.store(fixtureBytes('gfs-region'), 'region'), 'refuse')
  const start = air.file.header.validTimes[0]
  let worst = 0
  for (const [latitude, longitude, time] of [
    [47.5, 260, start],
    [41.2, 271.3, start + 3000],
    [33.3, 283.9, start + 10_800],
  ]) {
    const column = air.column(latitude * DEGREE, longitude * DEGREE, time)
    expect(column).toHaveLength(26)
    for (let level = 1; level < column.length; level++) {
      const [lower, upper] = [column[level - 1], column[level]]
      const virtual = [lower, upper].map(
        ({ temperature, pressure, vapourPressure = 0 }) =>
          temperature / (1 - (0.378 * vapourPressure) / pressure),
      )
      const thickness =
        ((287.05 * (virtual[0] + virtual[1])) / 2 / 9.80665) *
        Math.log(lower.pressure / upper.pressure)
      const given = upper.geopotentialHeight - lower.geopotentialHeight
      worst = Math.max(worst, Math.abs(thickness / given - 1))
    }
  }
  expect(worst).toBeLessThan(0.01)
  expect(worst).toBeGreaterThan(0) // the forecast's heights are not computed from the same temperatures
})
