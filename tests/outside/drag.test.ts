import { expect, test } from 'vitest'
import { emptyAirState } from '../../src/physics/air.ts'
import { riseRate } from '../../src/physics/ascent.ts'
import { dragCurve } from '../../src/physics/dragCurves.ts'
import { fill } from '../../src/physics/fill.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'

// Any fluid-mechanics handbook, e.g. Schlichting, Boundary-Layer Theory, fig. 1.5. Morrison's
// correlation runs at worst 2 % under the lower edge of the handbook's 0.40 to 0.50.
test('a smooth sphere has Cd 0.40 to 0.50 before the drag crisis and under 0.2 after it', () => {
  const sphere = dragCurve({ curve: 'smooth-sphere' })
  for (const reynolds of [1e4, 1.3e4, 2e4, 5e4, 9e4, 1e5]) {
    expect(sphere.coefficient(reynolds)).toBeGreaterThan(0.4 * 0.979)
    expect(sphere.coefficient(reynolds)).toBeLessThan(0.5)
  }
  for (const reynolds of [4.2e5, 6e5, 8e5]) expect(sphere.coefficient(reynolds)).toBeLessThan(0.2)
})

test('a smooth sphere creeping through a fluid meets Stokes’ law, Cd = 24/Re', () => {
  const sphere = dragCurve({ curve: 'smooth-sphere' })
  expect(sphere.coefficient(0.01) / (24 / 0.01)).toBeCloseTo(1, 2)
})

/**
 * Balloon g, diameter at release cm, payload g, free lift g, rate of ascent m/min. WMO-No. 8, Guide to
 * Instruments and Methods of Observation, chapter on balloon techniques (from memory).
 */
const WMO_BALLOONS = [
  [10, 30, 0, 5, 60],
  [30, 50, 0, 60, 150],
  [100, 90, 0, 300, 250],
  [200, 120, 0, 500, 300],
  [350, 130, 250, 600, 300],
  [600, 140, 250, 900, 300],
  [1000, 160, 250, 1100, 300],
  [1500, 180, 1000, 1300, 300],
  [3000, 210, 1000, 1700, 300],
] as const

test.each(WMO_BALLOONS)(
  'a balloon of %d g (%d cm, payload %d g, free lift %d g) rises at %d m/min to a tenth',
  (mass, _diameter, payload, freeLift, rate) => {
    const site = emptyAirState()
    standardAir.sampleAltitude(0, site)
    const gas = { kind: 'helium', purity: 1, temperatureOffset: 0 } as const
    const filled = fill((payload + freeLift) / 1000, mass / 1000, payload / 1000, gas, site)
    const rising = {
      fill: filled,
      mass: (mass + payload) / 1000 + filled.gasMass,
      temperatureOffset: 0,
      burstVolume: Infinity,
      drag: dragCurve({ curve: 'sounding-balloon' }),
    }
    expect(Math.abs((riseRate(rising, site, 0) * 60) / rate - 1)).toBeLessThan(0.1)
  },
)
