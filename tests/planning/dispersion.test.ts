import { describe, expect, it } from 'vitest'
import { Column } from '../../src/physics/column.ts'
import { fly, type Flight, type FlightPlan } from '../../src/physics/flight.ts'
import { disperse, flyMembers } from '../../src/planning/dispersion.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { burstFactor, MEMBER_VALUES, MemberFlights } from '../../src/planning/memberFlights.ts'
import { isInside } from '../../src/planning/regions.ts'
import { defaultSpread, windError, type Spread } from '../../src/planning/spread.ts'
import { windErrorShape } from '../../src/planning/windError.ts'
import { inventedAir, inventedPlan } from './inventedAir.ts'

const column = new Column(inventedAir())
const plan = inventedPlan({
  balloon: { mass: 1, ratedBurstDiameter: 7.5, shareLeftOnLine: 0.3 },
  parachute: { dragArea: 0.9 },
})
const nothing: Spread = {
  neckLift: 0,
  balloonMass: 0,
  burstDiameterShare: 0,
  dragShare: 0,
  dragAreaShare: 0,
  shareLeftOnLine: 0,
  releaseTime: 0,
  wind: 0,
}
const usual = defaultSpread(plan, 6 * 3600)

/** Root-mean-square distance of the landings from their mean, m. */
function scatter(spread: Spread, members = 1024): number {
  const { landing } = disperse(plan, column, spread, members, 3)
  let squares = 0
  for (let i = 0; i < landing.points.length; i += 2) {
    const place = { latitude: landing.points[i], longitude: landing.points[i + 1] }
    squares += geodesicLine(landing.mean, place).distance ** 2
  }
  return Math.sqrt(squares / (landing.points.length / 2))
}

/** How far two flights land apart, m. */
function apart(a: Flight, b: Flight): number {
  return geodesicLine(a.landing, b.landing).distance
}

describe('a single spread', () => {
  const { balloon } = plan
  it.each([
    ['neckLift', 0.01, (d: number) => ({ neckLift: plan.neckLift + d })],
    ['balloonMass', 0.005, (d: number) => ({ balloon: { ...balloon, mass: 1 + d } })],
    [
      'burstDiameterShare',
      0.0004,
      (d: number) => ({ balloon: { ...balloon, ratedBurstDiameter: 7.5 * Math.exp(d) } }),
    ],
    ['dragAreaShare', 0.01, (d: number) => ({ parachute: { dragArea: 0.9 * Math.exp(d) } })],
    [
      'shareLeftOnLine',
      0.01,
      (d: number) => ({ balloon: { ...balloon, shareLeftOnLine: 0.3 + d } }),
    ],
  ] as const)('in %s strews as the finite difference says', (input, spread, changed) => {
    const slope =
      apart(
        fly({ ...plan, ...(changed(spread) as Partial<FlightPlan>) }, column),
        fly({ ...plan, ...(changed(-spread) as Partial<FlightPlan>) }, column),
      ) /
      (2 * spread)
    const found = scatter({ ...nothing, [input]: spread }, 8192)
    expect(found).toBeGreaterThan(5)
    expect(Math.abs(found / (slope * spread) - 1)).toBeLessThan(0.02)
  })

  it('in dragShare strews as the finite difference says', () => {
    const drag = (d: number) =>
      fly({ ...plan, drag: { curve: 'constant', coefficient: 0.3 * Math.exp(d) } }, column)
    const slope = apart(drag(1e-4), drag(-1e-4)) / 2e-4
    const { landing } = disperse(
      { ...plan, drag: { curve: 'constant', coefficient: 0.3 } },
      column,
      { ...nothing, dragShare: 0.01 },
      1024,
      3,
    )
    // Along a line the ellipse of 90 % reaches 1.645 standard deviations.
    const [, ninety] = landing.ellipses
    expect(Math.abs(ninety.semiMajor / 1.6449 / (slope * 0.01) - 1)).toBeLessThan(0.02)
  })

  it('in releaseTime moves the landing in time alone', () => {
    const { landing } = disperse(plan, column, { ...nothing, releaseTime: 600 }, 1024, 3)
    expect(landing.ellipses[2].semiMajor).toBeLessThan(0.1)
    // 5 to 95 % of a normal distribution is 3.290 standard deviations.
    expect((landing.elapsed.p95 - landing.elapsed.p05) / 600).toBeCloseTo(3.29, 1)
  })

  it('in wind strews as the covariance of the drift says', () => {
    const windSpread = 3
    // Seconds that the flight spends in each 100 m, from its recorded path.
    const layer = 100
    const seconds: number[] = Array<number>(400).fill(0)
    let before = { altitude: plan.launch.altitude, elapsed: 0 }
    fly(plan, column, {
      record({ altitude, elapsed }) {
        const steps = 20
        for (let i = 0; i < steps; i++) {
          const z = before.altitude + ((altitude - before.altitude) * (i + 0.5)) / steps
          seconds[Math.floor(z / layer)] += (elapsed - before.elapsed) / steps
        }
        before = { altitude, elapsed }
      },
    })
    let variance = 0
    seconds.forEach((a, i) => {
      seconds.forEach((b, j) => {
        const [low, high] = [(i + 0.5) * layer, (j + 0.5) * layer]
        const correlation = Math.exp(-(((low - high) / 2000) ** 2) / 2)
        variance += a * b * windErrorShape(low) * windErrorShape(high) * correlation
      })
    })
    const expected = windSpread * Math.sqrt(2 * variance)
    const found = scatter({ ...nothing, wind: windSpread }, 4096)
    expect(Math.abs(found / expected - 1)).toBeLessThan(0.03)
  })
})

describe('the spread', () => {
  it('of the wind meets its published anchor: 4 m/s rms over 1000 to 100 hPa at 6 h', () => {
    expect(windError(6 * 3600)).toBe(4)
    let square = 0
    for (let z = 50; z < 16_000; z += 100) square += (2 * windErrorShape(z) ** 2) / 160
    expect(square).toBeCloseTo(1, 3)
    expect(windError(24 * 3600)).toBeGreaterThan(windError(12 * 3600))
  })

  it('of bursts is skew to the low side, its logarithm of the deviation asked for', () => {
    const count = 20_000
    const logs = Array.from({ length: count }, (_, i) =>
      Math.log(burstFactor((i + 0.5) / count, 0.06)),
    )
    const mean = logs.reduce((sum, x) => sum + x, 0) / count
    const deviation = Math.sqrt(logs.reduce((sum, x) => sum + (x - mean) ** 2, 0) / count)
    const skewness = logs.reduce((sum, x) => sum + ((x - mean) / deviation) ** 3, 0) / count
    expect(mean).toBeCloseTo(0, 4)
    expect(deviation).toBeCloseTo(0.06, 4)
    // Skewness of Gumbel's distribution: −1.1395 (Johnson, Kotz and Balakrishnan, eq. 22.30)
    expect(skewness).toBeCloseTo(-1.14, 1)
  })
})

describe('a dispersion', () => {
  it('is the same for the same seed and another for another', () => {
    const first = disperse(plan, column, usual, 500, 1)
    expect(disperse(plan, column, usual, 500, 1)).toEqual(first)
    expect(disperse(plan, column, usual, 500, 2)).not.toEqual(first)
  })

  it('draws regions and ellipses that hold their shares of 20 000 fresh members', () => {
    const { landing } = disperse(plan, column, usual, 4000, 1)
    const fresh = new Float64Array(20_000 * MEMBER_VALUES)
    flyMembers(new MemberFlights(plan, column, usual, 99), 0, 20_000, fresh)
    for (const region of landing.regions) {
      let inside = 0
      for (let at = 0; at < fresh.length; at += MEMBER_VALUES) {
        if (isInside(region, fresh[at], fresh[at + 1])) inside++
      }
      expect(Math.abs(inside / 20_000 - region.share)).toBeLessThan(
        region.share === 0.5 ? 0.02 : 0.01,
      )
    }
  })

  it('errs less with more members, as it says, and far less than chance', () => {
    const { landing } = disperse(plan, column, usual, 65_536, 4242)
    const errors = [256, 4096].map((members) => {
      let real = 0
      let claimed = 0
      const trials = 12
      for (let seed = 0; seed < trials; seed++) {
        const estimate = disperse(plan, column, usual, members, seed)
        real += geodesicLine(landing.mean, estimate.landing.mean).distance ** 2 / trials
        claimed += estimate.standardError ** 2 / trials
      }
      return { real: Math.sqrt(real), claimed: Math.sqrt(claimed) }
    })
    for (const { real, claimed } of errors) {
      expect(real / claimed).toBeGreaterThan(0.5)
      expect(real / claimed).toBeLessThan(1.7)
    }
    // 16 times the members: chance alone would err a quarter as much.
    expect(errors[0].real / errors[1].real).toBeGreaterThan(4)
    const chance = scatter(usual) / Math.sqrt(4096)
    expect(errors[1].real).toBeLessThan(chance / 3)
  })

  it('gives each cause the variance that remains when it acts alone', () => {
    const strong: Spread = { ...usual, wind: 1, burstDiameterShare: 0.1 }
    const { causes } = disperse(plan, column, strong, 4000, 1)
    const total = scatter(strong, 4000) ** 2
    for (const { input, varianceShare } of causes) {
      const alone = scatter({ ...nothing, [input]: strong[input] }, 4000) ** 2 / total
      expect(Math.abs(varianceShare - alone)).toBeLessThan(0.03)
    }
    const sum = causes.reduce((all, cause) => all + cause.varianceShare, 0)
    expect(sum).toBeGreaterThan(0.95)
    expect(sum).toBeLessThan(1.02)
  })

  it('counts what lands inside areas, also across the antimeridian', () => {
    const east = { ...plan, launch: { ...plan.launch, longitude: Math.PI - 1e-3 } }
    const west = -Math.PI
    const box = (from: number, to: number) => ({
      name: null,
      polygons: [
        [
          [
            [from, 0.5],
            [to, 0.5],
            [to, 1.2],
            [from, 1.2],
            [from, 0.5],
          ] as [number, number][],
        ],
      ],
    })
    const { inRegions, landing } = disperse(east, column, usual, 400, 1, [
      box(Math.PI - 0.2, Math.PI + 0.2),
      box(west, west + 0.2),
    ])
    expect(inRegions[0].share).toBe(1)
    let beyond = 0
    for (let i = 1; i < landing.points.length; i += 2) if (landing.points[i] < 0) beyond++
    expect(inRegions[1].share).toBe(beyond / 400)
    expect(beyond).toBeGreaterThan(0)
  })

  it('leaves out and counts members that do not fly', () => {
    const slack = { ...nothing, neckLift: 1.1 }
    const { members, notFlown, landing } = disperse(plan, column, slack, 400, 1)
    expect(notFlown).toBeGreaterThan(20)
    expect(landing.points.length / 2).toBe(members - notFlown)
    expect(Number.isFinite(landing.mean.latitude)).toBe(true)
  })
})
