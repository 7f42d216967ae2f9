import { describe, expect, it } from 'vitest'
import { FieldAir, type FieldLevel } from '../../src/fields/fieldAir.ts'
import { OutsideField } from '../../src/fields/outsideField.ts'
import { Column } from '../../src/physics/column.ts'
import { fly, flyAlongPath, type FlightPlan } from '../../src/physics/flight.ts'
import { NotFlyable } from '../../src/physics/notFlyable.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { TrackRecorder } from '../../src/physics/track.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { DEGREE, standardFlight } from '../physics/plans.ts'
import { fixtureBytes } from './fixture.ts'
import { referenceFieldFlight } from './referenceFieldFlight.ts'
import { fieldFolder } from './storedField.ts'
import { CODES, latLonSection, syntheticMessage } from './synthetic.ts'

const fields = fieldFolder()
const START = Date.UTC(2011, 0, 15, 12) / 1000

function planAt(
  latitude: number,
  longitude: number,
  changes: Parameters<typeof standardFlight>[0] = {},
): FlightPlan {
  const plan = standardFlight({ altitude: 345, ...changes, latitude, longitude })
  return { ...plan, launch: { ...plan.launch, time: START + 600 } }
}

const regionFile = await fields.store(fixtureBytes('gfs-region'), 'region')
const region = new FieldAir(regionFile, 'refuse')

const CASES: [string, FlightPlan][] = [
  ['in the middle of a region', planAt(35.18, -97.44)],
  ['in a jet', planAt(44, -85)],
  ['from a high site', planAt(40.1, -100.2, { altitude: 1800, landingAltitude: 700 })],
  ['with a small parachute', planAt(35.18, -97.44, { parachute: { dragArea: 0.02 } })],
  [
    'with a small balloon',
    planAt(38, -90, {
      balloon: { mass: 0.35, ratedBurstDiameter: 4.2 },
      neckLift: 0.9,
      payloadMass: 0.25,
      parachute: { dragArea: 0.3 },
    }),
  ],
]

describe.each(CASES)('a flight %s', (_name, plan) => {
  it('equals the equations of the model, integrated in time, within 10 m and 1 s', () => {
    const flight = flyAlongPath(plan, region)
    const exact = referenceFieldFlight(plan, region)
    expect(Math.abs(flight.burst.altitude - exact.burst.altitude)).toBeLessThan(0.05)
    expect(geodesicLine(flight.burst, exact.burst).distance).toBeLessThan(10)
    expect(Math.abs(flight.landing.elapsed - exact.landing.elapsed)).toBeLessThan(1)
    expect(geodesicLine(flight.landing, exact.landing).distance).toBeLessThan(10)
  })

  it('moves by less than 10 m and 1 s when the steps are halved', () => {
    const whole = flyAlongPath(plan, region)
    const half = flyAlongPath(plan, region, undefined, region.longestStep / 2)
    expect(geodesicLine(whole.landing, half.landing).distance).toBeLessThan(10)
    expect(Math.abs(whole.landing.elapsed - half.landing.elapsed)).toBeLessThan(1)
    expect(whole.landing).not.toEqual(half.landing)
  })

  it('feels that the air is not the launch site’s all the way', () => {
    const { latitude, longitude, time } = plan.launch
    const column = new Column(new ProfileAir(region.column(latitude, longitude, time)))
    const { distance } = geodesicLine(flyAlongPath(plan, region).landing, fly(plan, column).landing)
    expect(distance).toBeGreaterThan(1000)
  })

  it('is recorded as it is flown', () => {
    const recorder = new TrackRecorder()
    const recorded = flyAlongPath(plan, region, recorder)
    const plain = flyAlongPath(plan, region)
    expect(geodesicLine(recorded.landing, plain.landing).distance).toBeLessThan(10)
    const track = recorder.track()
    expect(track.map(({ phase }) => phase).filter((phase) => phase === 'burst')).toHaveLength(1)
    expect(track[0]).toMatchObject({ altitude: plan.launch.altitude, elapsed: 0, phase: 'ascent' })
    expect(track.at(-1)).toMatchObject({ altitude: plan.landingAltitude, phase: 'landing' })
    expect(geodesicLine(track[track.length - 1], recorded.landing).distance).toBeLessThan(0.01)
    // Between two points of the track the fine path is never far from the straight line.
    const fine = new TrackRecorder()
    flyAlongPath(plan, region, fine, 50)
    for (const point of fine.track()) {
      const next = track.findIndex(({ elapsed }) => elapsed >= point.elapsed)
      if (next <= 0) continue
      const [from, to] = [track[next - 1], track[next]]
      const share = (point.elapsed - from.elapsed) / (to.elapsed - from.elapsed)
      const chord = {
        latitude: from.latitude + (to.latitude - from.latitude) * share,
        longitude: from.longitude + (to.longitude - from.longitude) * share,
      }
      expect(geodesicLine(chord, point).distance).toBeLessThan(60)
    }
  })
})

describe('a field on a fine grid', async () => {
  // The region's air on a grid of 4 km, with waves of 1 m/s and 40 km and their like in time put on it.
  const [columns, rows, step] = [90, 60, 0.04]
  const grid = latLonSection(columns, rows, 36.4, 262, step)
  const messages: Buffer[] = []
  for (const hours of [120, 123]) {
    const points = Array.from({ length: columns * rows }, (_, point) => {
      const latitude = 36.4 - step * Math.floor(point / columns)
      const longitude = 262 + step * (point % columns)
      return region.column(latitude * DEGREE, longitude * DEGREE, START + (hours - 120) * 3600)
    })
    for (let level = 0; level < 26; level += 2) {
      const wave = (point: number, phase: number) =>
        Math.sin((point % columns) / 1.6 + level + phase) *
        Math.cos(Math.floor(point / columns) / 1.9 + phase + hours)
      const add = (
        code: readonly [number, number],
        value: (level: FieldLevel, point: number) => number,
      ) =>
        messages.push(
          syntheticMessage(grid, {
            code,
            pressure: points[0][level].pressure,
            hours,
            values: points.map((column, point) => value(column[level], point)),
          }),
        )
      add(CODES.geopotentialHeight, ({ geopotentialHeight }) => geopotentialHeight)
      add(CODES.temperature, ({ temperature }, point) => temperature + 0.3 * wave(point, 3))
      add(CODES.windEast, ({ windEast }, point) => windEast + wave(point, 1))
      add(CODES.windNorth, ({ windNorth }, point) => windNorth + wave(point, 2))
    }
  }
  const air = new FieldAir(await fields.store(Buffer.concat(messages), 'fine'), 'refuse')

  it.each([
    [35.18, -97.44],
    [35.4, -97.2],
    [34.9, -97.3],
  ])('is flown in steps that see it, from %d, %d', (latitude, longitude) => {
    const plan = planAt(latitude, longitude)
    expect(air.longestStep).toBeLessThan(region.longestStep)
    const whole = flyAlongPath(plan, air)
    const half = flyAlongPath(plan, air, undefined, air.longestStep / 2)
    expect(geodesicLine(whole.landing, half.landing).distance).toBeLessThan(10)
    const exact = referenceFieldFlight(plan, air)
    expect(geodesicLine(whole.landing, exact.landing).distance).toBeLessThan(10)
  })
})

/** A field that has one column everywhere, on a grid; at two times. */
function uniformField(column: readonly FieldLevel[], grid: Buffer, points: number): Buffer {
  const messages: Buffer[] = []
  for (const hours of [120, 126]) {
    for (const level of column) {
      const add = (code: readonly [number, number], value: number) =>
        messages.push(
          syntheticMessage(grid, {
            code,
            pressure: level.pressure,
            hours,
            values: Array<number>(points).fill(value),
          }),
        )
      add(CODES.geopotentialHeight, level.geopotentialHeight)
      add(CODES.temperature, level.temperature)
      add(CODES.windEast, level.windEast)
      add(CODES.windNorth, level.windNorth)
      if (level.relativeHumidity !== undefined)
        add(CODES.relativeHumidity, level.relativeHumidity * 100)
    }
  }
  return Buffer.concat(messages)
}

describe('a field with one column everywhere', async () => {
  const column = region.column((44 * Math.PI) / 180, (-85 * Math.PI) / 180, START)
  const profile = new Column(new ProfileAir(column))
  const fineProfile = new Column(profile.air, 100)
  const globe = new FieldAir(
    await fields.store(uniformField(column, latLonSection(36, 19, 90, 0, 10), 684), 'uniform'),
    'refuse',
  )

  it.each<[string, FlightPlan]>([
    ...CASES,
    ['with a constant drag', planAt(44, -85, { drag: { curve: 'constant', coefficient: 0.3 } })],
    ...[1.7, 1.9, 2.1, 2.5, 3.5].map((neckLift): [string, FlightPlan] => [
      `with a smooth sphere of ${neckLift} kg neck lift`,
      planAt(44, -85, { neckLift, drag: { curve: 'smooth-sphere' } }),
    ]),
  ])('is flown as the sounding of that column: %s', (_name, plan) => {
    const inField = flyAlongPath(plan, globe)
    // In the drag crisis the usual slabs are themselves some 11 m off.
    const inProfile = fly(plan, plan.drag.curve === 'smooth-sphere' ? fineProfile : profile)
    expect(Math.abs(inField.burst.altitude - inProfile.burst.altitude)).toBeLessThan(0.01)
    expect(geodesicLine(inField.burst, inProfile.burst).distance).toBeLessThan(10)
    expect(geodesicLine(inField.landing, inProfile.landing).distance).toBeLessThan(10)
    expect(Math.abs(inField.landing.elapsed - inProfile.landing.elapsed)).toBeLessThan(1)
    expect(inField.descent.peakSpeed / inProfile.descent.peakSpeed).toBeCloseTo(1, 2)
  })

  it('is flown across the antimeridian and by the pole', () => {
    for (const [latitude, longitude] of [
      [30, 179.9],
      [88.8, 20],
    ]) {
      const plan = planAt(latitude, longitude)
      const inField = flyAlongPath(plan, globe)
      expect(Math.abs(inField.landing.longitude)).toBeLessThanOrEqual(Math.PI)
      expect(geodesicLine(inField.landing, fly(plan, profile).landing).distance).toBeLessThan(60)
    }
    expect(flyAlongPath(planAt(30, 179.9), globe).landing.longitude).toBeLessThan(0)
  })

  it('refuses the same plans with the same number that would work', () => {
    const refusal = (run: () => unknown) => {
      try {
        run()
      } catch (error) {
        if (error instanceof NotFlyable) return error.reason
        throw error
      }
      throw new Error('was not refused')
    }
    const plans = [
      planAt(44, -85, { neckLift: 1.4 }),
      planAt(44, -85, { balloon: { ratedBurstDiameter: 1 } }),
      planAt(44, -85, { balloon: { ratedBurstDiameter: 100 } }),
      planAt(44, -85, {
        neckLift: 1.5001,
        gas: { kind: 'helium', purity: 1, temperatureOffset: -25 },
      }),
      planAt(44, -85, { landingAltitude: 40_000 }),
    ]
    const kinds = plans.map((plan) => {
      const inField = refusal(() => flyAlongPath(plan, globe))
      const inProfile = refusal(() => fly(plan, profile))
      expect(Object.keys(inField)).toEqual(Object.keys(inProfile))
      for (const [key, value] of Object.entries(inProfile)) {
        const other = inField[key as keyof typeof inField] as unknown
        if (typeof value === 'number' && key !== 'altitude')
          expect(Number(other) / value).toBeCloseTo(1, 3)
        else if (key === 'kind') expect(other).toBe(value)
      }
      return inField.kind
    })
    expect(kinds).toEqual([
      'no-free-lift',
      'full-at-fill',
      'no-burst',
      'stops-rising',
      'falls-past-landing',
    ])
  })
})

describe('a flight that leaves the field', () => {
  it('is refused at the place where it leaves', () => {
    expect(() => flyAlongPath(planAt(40, -75.1), region)).toThrow(OutsideField)
    const late = planAt(40, -95)
    const lateLaunch = { ...late, launch: { ...late.launch, time: START + 9000 } }
    expect(() => flyAlongPath(lateLaunch, region)).toThrow("outside the field's times")
  })

  it('or is flown in the nearest air, which is told', () => {
    const holding = new FieldAir(regionFile, 'hold')
    flyAlongPath(planAt(40, -95), holding)
    expect(holding.takeUse()).toMatchObject({
      heldPlace: false,
      heldTime: false,
      belowLevels: null,
    })
    flyAlongPath(planAt(40, -75.1), holding)
    expect(holding.takeUse()).toMatchObject({ heldPlace: true, heldTime: false })
    const late = planAt(40, -95)
    flyAlongPath({ ...late, launch: { ...late.launch, time: START + 9000 } }, holding)
    const use = holding.takeUse()
    expect(use).toMatchObject({ heldPlace: false, heldTime: true })
    expect(use.aboveLevels?.bottom).toBeGreaterThan(29_000)
    expect(use.aboveLevels?.top).toBeGreaterThan(31_000)
  })
})
