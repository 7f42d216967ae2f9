import { expect, test } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { AIR_MOLAR_MASS } from '../../src/physics/constants.ts'
import { fill } from '../../src/physics/fill.ts'
import { gasMolarMass, type GasKind } from '../../src/physics/gas.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'

const pure = (kind: GasKind) => ({ kind, purity: 1, temperatureOffset: 0 })

test('molar masses are near 4 (helium), 2 (hydrogen) and 28.97 (air) g/mol (common practice)', () => {
  expect(gasMolarMass(pure('helium')) * 1000).toBeCloseTo(4.0, 2)
  expect(gasMolarMass(pure('hydrogen')) * 1000).toBeCloseTo(2.016, 3)
  expect(AIR_MOLAR_MASS * 1000).toBeCloseTo(28.97, 1)
})

test('helium lifts about 6/7 of the weight of the air it displaces (common practice)', () => {
  const lifted = 1 - gasMolarMass(pure('helium')) / AIR_MOLAR_MASS
  expect(Math.abs(lifted / (6 / 7) - 1)).toBeLessThan(0.01)
})

test('1 m³ of helium at 15 °C and 1013.25 hPa lifts 1.056 kg (from the two above)', () => {
  const site = emptyAirState()
  standardAir.sampleAltitude(0, site)
  const { volume, diameter } = fill(1.056 - 0.2, 0.2, 0, pure('helium'), site)
  expect(volume).toBeCloseTo(1, 3)
  expect(diameter).toBeCloseTo(1.2407, 3) // sphere of 1 m³
})

test('impure helium lifts less by the share of air in it', () => {
  const site = emptyAirState()
  standardAir.sampleAltitude(0, site)
  const best = fill(2, 1, 1, pure('helium'), site)
  const impure = fill(2, 1, 1, { ...pure('helium'), purity: 0.95 }, site)
  expect(best.volume / impure.volume).toBeCloseTo(0.95, 5)
})
