import { describe, expect, test } from 'vitest'
import { type VaryingAir } from '../../src/physics/air.ts'
import { Column } from '../../src/physics/column.ts'
import { type DragChoice } from '../../src/physics/dragCurves.ts'
import { fly, flyAlongPath } from '../../src/physics/flight.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { DEGREE, standardFlight } from './plans.ts'

const plan = standardFlight()
const still = fly(plan, new Column(standardAir))

/** WGS 84, NIMA TR8350.2: distance, m, of a radian of longitude at a latitude and altitude. */
function radianEast(latitude: number, altitude: number): number {
  const flattening = 1 / 298.257223563
  const squash = Math.sqrt(1 - flattening * (2 - flattening) * Math.sin(latitude) ** 2)
  return (6_378_137 / squash + altitude) * Math.cos(latitude)
}

/** The standard atmosphere with a wind that turns about the pole by so many radians a second. */
function turningAir(rate: (longitude: number, elapsed: number) => number): VaryingAir {
  return {
    longestStep: 1000,
    sample(latitude, longitude, altitude, time, out) {
      standardAir.sampleAltitude(altitude, out)
      const turn = rate(longitude - plan.launch.longitude, time - plan.launch.time)
      out.windEast = turn * radianEast(latitude, altitude)
    },
    breakAbove: (altitude) =>
      standardAir.breakAltitudes.find((kink) => kink > altitude) ?? Infinity,
    breakBelow: (altitude) =>
      standardAir.breakAltitudes.findLast((kink) => kink < altitude) ?? -Infinity,
  }
}

/** Radians a second: 36 m/s at 47° N. */
const TURN = 7e-6
const HOUR = 3600

// Where the drift is a turn about the pole, the longitude obeys an equation of its own, whatever the height.
describe.each([
  {
    name: 'stronger towards the east: dλ/dt = a·(1 + λ/b)',
    rate: (longitude: number) => TURN * (1 + longitude / 0.05),
    longitude: (t: number) => 0.05 * Math.expm1((TURN * t) / 0.05),
  },
  {
    name: 'stronger with time: dλ/dt = a·(1 + t/b)',
    rate: (_longitude: number, t: number) => TURN * (1 + t / HOUR),
    longitude: (t: number) => TURN * (t + t ** 2 / (2 * HOUR)),
  },
  {
    name: 'turning round with time: dλ/dt = a·cos(t/b)',
    rate: (_longitude: number, t: number) => TURN * Math.cos(t / HOUR),
    longitude: (t: number) => TURN * HOUR * Math.sin(t / HOUR),
  },
])('in a wind $name', ({ rate, longitude }) => {
  const air = turningAir(rate)
  const error = (longestStep?: number) => {
    const { landing } = flyAlongPath(plan, air, undefined, longestStep)
    const drift = landing.longitude - plan.launch.longitude
    return (drift - longitude(landing.elapsed)) * radianEast(landing.latitude, 0)
  }

  test('a flight lands where the exact solution does, within 5 m', () => {
    expect(Math.abs(error())).toBeLessThan(5)
    expect(longitude(still.landing.elapsed) / DEGREE).toBeGreaterThan(0.8)
  })

  test('halving the steps leaves less than a quarter of the error: better than second order', () => {
    const [coarse, fine] = [error(4000), error(2000)]
    expect(Math.abs(coarse)).toBeGreaterThan(3)
    expect(coarse / fine).toBeGreaterThan(4)
  })
})

test.each<DragChoice>([
  { curve: 'sounding-balloon' },
  { curve: 'constant', coefficient: 0.3 },
  { curve: 'smooth-sphere' },
])('a flight in air that does not vary is the flight in its column: $curve', (drag) => {
  for (const neckLift of [1.7, 2, 2.6, 4]) {
    const heavier = { ...plan, neckLift, drag }
    const { landing, burst } = flyAlongPath(
      heavier,
      turningAir(() => 0),
    )
    const inColumn = fly(heavier, new Column(standardAir))
    expect(Math.abs(landing.elapsed - inColumn.landing.elapsed)).toBeLessThan(1)
    expect(landing.longitude).toBeCloseTo(plan.launch.longitude, 12)
    expect(burst.altitude).toBeCloseTo(inColumn.burst.altitude, 3)
  }
})
