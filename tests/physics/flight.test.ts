import { readFileSync } from 'node:fs'
import { describe, expect, test } from 'vitest'
import { type ColumnAir } from '../../src/physics/air.ts'
import { Column } from '../../src/physics/column.ts'
import { fly, type Flight, type FlightPlan } from '../../src/physics/flight.ts'
import { NotFlyable } from '../../src/physics/notFlyable.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { standardAir } from '../../src/physics/standardAtmosphere.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { standardFlight } from './plans.ts'
import { referenceFlight } from './referenceFlight.ts'

const fixture = (name: string) => readFileSync(new URL(`../fixtures/${name}`, import.meta.url))
const soundingAir = (name: string) => new ProfileAir(readSoundings(fixture(name), {})[0].levels)
const norman = soundingAir('sounding-norman-2023-05-22.csv')
const barrow = soundingAir('igra2-point-barrow-2010-06-01.txt')
const normanPlan = standardFlight({ altitude: 345, latitude: 35.18, longitude: -97.44 })

const CASES: [string, FlightPlan, ColumnAir][] = [
  ['in the standard atmosphere', standardFlight(), standardAir],
  ['in a real sounding of 256 levels', normanPlan, norman],
  [
    'near the pole',
    standardFlight({ altitude: 12, latitude: 71.3, longitude: -156.8, landingAltitude: 0 }),
    barrow,
  ],
  [
    'with warm hydrogen and half the balloon left on the line',
    {
      ...normanPlan,
      gas: { kind: 'hydrogen', purity: 0.99, temperatureOffset: 12 },
      balloon: { ...normanPlan.balloon, shareLeftOnLine: 0.5 },
    },
    norman,
  ],
  ['with a small parachute', { ...normanPlan, parachute: { dragArea: 0.02 } }, norman],
  [
    'with a constant drag',
    { ...normanPlan, drag: { curve: 'constant', coefficient: 0.3 } },
    norman,
  ],
  ['with a smooth sphere', { ...normanPlan, drag: { curve: 'smooth-sphere' } }, norman],
  [
    'over a mountain, landing high',
    { ...normanPlan, launch: { ...normanPlan.launch, altitude: 1234 }, landingAltitude: 3210 },
    norman,
  ],
]

describe.each(CASES)('a flight %s', (_name, plan, air) => {
  test('equals the exact solution within 10 m and 1 s', () => {
    const flight = fly(plan, new Column(air))
    const exact = referenceFlight(plan, air)
    expect(Math.abs(flight.burst.altitude - exact.burst.altitude)).toBeLessThan(0.001)
    expect(Math.abs(flight.burst.elapsed - exact.burst.elapsed)).toBeLessThan(1)
    expect(geodesicLine(flight.burst, exact.burst).distance).toBeLessThan(10)
    expect(Math.abs(flight.landing.elapsed - exact.landing.elapsed)).toBeLessThan(1)
    expect(geodesicLine(flight.landing, exact.landing).distance).toBeLessThan(10)
  })

  test('moves by less than 10 m and 1 s when the slabs are halved', () => {
    const [whole, half] = [400, 200].map((thickness) => fly(plan, new Column(air, thickness)))
    expect(geodesicLine(whole.landing, half.landing).distance).toBeLessThan(10)
    expect(Math.abs(whole.landing.elapsed - half.landing.elapsed)).toBeLessThan(1)
  })
})

test('the drag crisis of a smooth sphere sets in at one height, whatever the slabs', () => {
  // Halved slabs once moved such landings by up to 225 m.
  for (let neckLift = 1.7; neckLift < 8; neckLift += 0.05) {
    const plan: FlightPlan = { ...normanPlan, neckLift, drag: { curve: 'smooth-sphere' } }
    const [whole, half] = [400, 200].map((thickness) => fly(plan, new Column(norman, thickness)))
    expect(geodesicLine(whole.landing, half.landing).distance).toBeLessThan(10)
    expect(Math.abs(whole.landing.elapsed - half.landing.elapsed)).toBeLessThan(1)
  }
})

test('the burst is where the gas fills the rated volume, to a millimetre', () => {
  // p·V = n·R·T with the moles of the fill, on both sides of the burst.
  const { burst, fill } = fly(normanPlan, new Column(norman))
  const filled = (Math.PI / 6) * 8.6 ** 3
  const volume = (altitude: number) => {
    const state = {
      pressure: 0,
      temperature: 0,
      density: 0,
      viscosity: 0,
      windEast: 0,
      windNorth: 0,
    }
    norman.sampleAltitude(altitude, state)
    return (fill.moles * 8.314462618 * state.temperature) / state.pressure
  }
  expect(volume(burst.altitude - 0.001)).toBeLessThan(filled)
  expect(volume(burst.altitude + 0.001)).toBeGreaterThan(filled)
})

describe('what cannot fly is refused with the number that works', () => {
  const column = new Column(standardAir)
  const reason = (plan: FlightPlan) => {
    try {
      fly(plan, column)
    } catch (error) {
      if (error instanceof NotFlyable) return error.reason
      throw error
    }
    throw new Error('it flew')
  }

  test('no free lift', () => {
    expect(reason(standardFlight({ neckLift: 1.5 }))).toEqual({
      kind: 'no-free-lift',
      neckLift: 1.5,
      payloadMass: 1.5,
    })
    expect(fly(standardFlight({ neckLift: 1.501 }), column).burst.altitude).toBeGreaterThan(30_000)
  })

  test('a balloon that is full at the site', () => {
    const refused = reason(standardFlight({ balloon: { ratedBurstDiameter: 1.9 } }))
    expect(refused.kind).toBe('full-at-fill')
    if (refused.kind !== 'full-at-fill') return
    expect(refused.fillDiameter).toBeCloseTo(1.929, 3)
    const larger = standardFlight({ balloon: { ratedBurstDiameter: refused.fillDiameter + 0.01 } })
    expect(fly(larger, column).burst.altitude).toBeGreaterThan(450)
  })

  test('a balloon that does not burst below 50 km', () => {
    const refused = reason(standardFlight({ balloon: { ratedBurstDiameter: 25 } }))
    expect(refused.kind).toBe('no-burst')
    if (refused.kind !== 'no-burst') return
    const smaller = { ratedBurstDiameter: refused.ceilingDiameter - 0.01 }
    expect(fly(standardFlight({ balloon: smaller }), column).burst.altitude).toBeGreaterThan(49_900)
  })

  test('a balloon whose cold gas lets it float', () => {
    const cold = { kind: 'helium', purity: 1, temperatureOffset: -40 } as const
    const refused = reason(standardFlight({ neckLift: 2, gas: cold }))
    expect(refused.kind).toBe('stops-rising')
    if (refused.kind !== 'stops-rising' || refused.neededNeckLift === null)
      throw new Error('no cure')
    const more = standardFlight({ neckLift: refused.neededNeckLift + 0.001, gas: cold })
    expect(fly(more, column).burst.altitude).toBeGreaterThan(20_000)
    const less = standardFlight({ neckLift: refused.neededNeckLift - 0.01, gas: cold })
    expect(reason(less).kind).toBe('stops-rising')
  })

  test('a burst below the landing altitude', () => {
    const refused = reason(
      standardFlight({ balloon: { ratedBurstDiameter: 2.1 }, landingAltitude: 8000 }),
    )
    expect(refused.kind).toBe('falls-past-landing')
  })
})

test('a flight may cross the antimeridian and stays in [-180, 180)', () => {
  const plan = standardFlight({ altitude: 345, latitude: 35.18, longitude: 179.8 })
  const { landing }: Flight = fly(plan, new Column(norman))
  expect(landing.longitude).toBeLessThan(0)
  expect(landing.longitude).toBeGreaterThanOrEqual(-Math.PI)
})
