import { emptyAirState, type AirState } from './air.ts'
import { type Column } from './column.ts'
import { drift, gravity } from './earth.ts'
import { FallMotion, type FallingLoad } from './fallMotion.ts'
import { recordedStep, type PathRecorder, type Whereabouts } from './path.ts'

/** How a descent ended, SI. The whereabouts passed in stand at the landing. */
export interface DescentEnd {
  peakSpeed: number
  landingSpeed: number
}

/** Steps in which the free fall after burst is taken. */
export const OPENING_STEPS = 10

const slabAir = emptyAirState()
const thirdAir = emptyAirState()
const pointAir = emptyAirState()

/**
 * Brings a load down from its burst at `at`, where it still rises at `burstRate` m/s, to the landing
 * altitude in m, which must lie below. Moves `at` to the landing.
 *
 * Downwards, q = w² obeys the linear equation dq/ds = 2g − k·q with k = ρ·Cd·A/m. It is stepped with
 * the two-stage Radau IIA method, which takes the free fall and the stiff, settled descent near the
 * ground alike; time is the quadrature ds/√q on the same nodes.
 */
export function descend(
  load: FallingLoad,
  burstRate: number,
  landingAltitude: number,
  column: Column,
  at: Whereabouts,
  recorder?: PathRecorder,
): DescentEnd {
  column.air.sampleAltitude(at.altitude, pointAir)
  coast(load, burstRate, pointAir, at)
  const fall = new Fall(load, column, at)
  recorder?.record(at, 0, 'descent')

  // √q starts from nothing, so the first slabs are stepped in σ = √s, in which the time is smooth.
  const apex = at.altitude
  const settled = Math.max(landingAltitude, column.altitude(column.slabAt(apex) - 1))
  const last = Math.sqrt(apex - settled)
  for (let step = 1; step <= OPENING_STEPS; step++) {
    const to = step === OPENING_STEPS ? settled : apex - ((step * last) / OPENING_STEPS) ** 2
    fall.openingStep(apex, to)
    recorder?.record(at, -fall.speed, to > landingAltitude ? 'descent' : 'landing')
  }

  while (at.altitude > landingAltitude) {
    const slab = column.slabBelow(at.altitude)
    let to = Math.max(landingAltitude, column.altitude(slab))
    if (recorder) to = Math.max(to, at.altitude - recordedStep(column.windRange[slab], fall.speed))
    fall.slabStep(slab, to)
    recorder?.record(at, -fall.speed, to > landingAltitude ? 'descent' : 'landing')
  }
  return { peakSpeed: Math.sqrt(fall.peakSquare), landingSpeed: fall.speed }
}

/** The last metre upwards: gravity and drag stop the load. Exact for constant density. */
export function coast(load: FallingLoad, burstRate: number, air: AirState, at: Whereabouts): void {
  const weight = gravity(at.altitude)
  const k = (air.density * load.dragArea) / load.mass
  const excess = (k * burstRate * burstRate) / (2 * weight)
  const rise = Math.log1p(excess) / k // from d(w²)/dz = −2g − k·w²
  const duration = Math.atan(Math.sqrt(excess)) / Math.sqrt((weight * k) / 2) // from dw/dt = −g − ½·k·w²
  drift(at, at.altitude, air.windEast * duration, air.windNorth * duration)
  at.altitude += rise
  at.elapsed += duration
}

/** The state of a falling load, stepped down through a column. */
class Fall extends FallMotion {
  private readonly column: Column
  private readonly at: Whereabouts

  constructor(load: FallingLoad, column: Column, at: Whereabouts) {
    super(load)
    this.column = column
    this.at = at
  }

  /** A step in σ = √(apex − z) down to altitude `to`, m. */
  openingStep(apex: number, to: number): void {
    const { air } = this.column
    const start = Math.sqrt(apex - this.at.altitude)
    const end = Math.sqrt(apex - to)
    const third = start + (end - start) / 3
    const thirdAltitude = apex - third * third
    air.sampleAltitude(thirdAltitude, thirdAir)
    air.sampleAltitude(to, pointAir)
    const duration = this.radau(
      end - start,
      2 * third, // ds = 2σ·dσ
      gravity(thirdAltitude),
      thirdAir.density,
      2 * end,
      gravity(to),
      pointAir.density,
    )
    this.move(
      to,
      duration,
      0.75 * thirdAir.windEast + 0.25 * pointAir.windEast,
      0.75 * thirdAir.windNorth + 0.25 * pointAir.windNorth,
    )
  }

  /** A step in altitude down to `to`, m, within one slab. */
  slabStep(slab: number, to: number): void {
    const { column } = this
    const from = this.at.altitude
    let duration: number
    if (from === column.altitude(slab + 1) && to === column.altitude(slab)) {
      duration = this.radau(
        from - to,
        1,
        column.thirdGravity[slab],
        column.thirdDensity[slab],
        1,
        column.edgeGravity[slab],
        column.edgeDensity[slab],
      )
    } else {
      const third = from - (from - to) / 3
      column.air.sampleAltitude(third, thirdAir)
      column.air.sampleAltitude(to, pointAir)
      duration = this.radau(
        from - to,
        1,
        gravity(third),
        thirdAir.density,
        1,
        gravity(to),
        pointAir.density,
      )
    }
    column.mean(to, from, slabAir)
    this.move(to, duration, slabAir.windEast, slabAir.windNorth)
  }

  private move(to: number, duration: number, windEast: number, windNorth: number): void {
    const { at } = this
    drift(at, (at.altitude + to) / 2, windEast * duration, windNorth * duration)
    at.altitude = to
    at.elapsed += duration
  }
}
