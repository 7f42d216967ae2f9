import { expect, test } from 'vitest'
import { Column } from '../../src/physics/column.ts'
import { fly } from '../../src/physics/flight.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { standardFlight } from '../physics/plans.ts'

/**
 * Parachute, drag coefficient on the nominal area, and the sea-level descent in m/s of 1.5 kg under a
 * nominal diameter of 1.3 m that v = √(2·m·g/(ρ·S·Cd)) gives by hand with S = 1.32732 m².
 * Knacke, NWC TP 6575, table 5-1 and eq. 5-1 (coefficients from memory).
 */
const PARACHUTES = [
  ['flat circular, low', 0.75, 4.912],
  ['flat circular, high', 0.8, 4.756],
  ['hemispherical, low', 0.62, 5.402],
  ['hemispherical, high', 0.77, 4.847],
  ['cross, low', 0.6, 5.492],
  ['cross, high', 0.85, 4.614],
] as const

const column = new Column(standardAir)

test.each(PARACHUTES)('%s: Cd %d lands at %d m/s', (_name, dragCoefficient, speed) => {
  const plan = standardFlight({
    altitude: 0,
    parachute: { diameter: 1.3, dragCoefficient },
    landingAltitude: 0,
  })
  // The load lags its terminal speed by less than 0.1 %.
  expect(fly(plan, column).landing.speed).toBeCloseTo(speed, 2)
})

test('a parachute given by its sea-level descent lands at that speed at sea level', () => {
  const plan = standardFlight({
    altitude: 0,
    parachute: { seaLevelDescent: 5 },
    landingAltitude: 0,
  })
  expect(fly(plan, column).landing.speed).toBeCloseTo(5, 2)
})
