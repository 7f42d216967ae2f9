import { expect, test } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'

/** Geometric altitude km, K, Pa, kg/m³. US Standard Atmosphere 1976, table I. */
const TABLE = [
  [0, 288.15, 101_325, 1.225],
  [5, 255.676, 54_048, 0.73643],
  [10, 223.252, 26_500, 0.41351],
  [15, 216.65, 12_112, 0.19475],
  [20, 216.65, 5529.3, 0.08891],
  [25, 221.552, 2549.2, 0.040084],
  [30, 226.509, 1197.0, 0.01841],
  [35, 236.513, 574.59, 0.0084634],
  [40, 250.35, 287.14, 0.0039957],
  [45, 264.164, 149.1, 0.0019663],
  [50, 270.65, 79.779, 0.0010269],
] as const

test.each(TABLE)(
  'the standard atmosphere at %d km',
  (kilometres, temperature, pressure, density) => {
    const air = emptyAirState()
    standardAir.sampleAltitude(kilometres * 1000, air)
    expect(Math.abs(air.temperature - temperature)).toBeLessThan(0.001)
    // The table gives five digits.
    expect(Math.abs(air.pressure / pressure - 1)).toBeLessThan(5e-5)
    expect(Math.abs(air.density / density - 1)).toBeLessThan(5e-5)
  },
)

test('viscosity at sea level is 1.7894e-5 Pa·s (US Standard Atmosphere 1976, table III)', () => {
  const air = emptyAirState()
  standardAir.sampleAltitude(0, air)
  expect(air.viscosity).toBeCloseTo(1.7894e-5, 9)
})
