import { emptyAirState } from './air.ts'
import { type Column } from './column.ts'
import { drift, gravity } from './earth.ts'
import { recordedStep, type PathRecorder, type Whereabouts } from './path.ts'

/** What comes down after the burst, SI. */
export interface FallingLoad {
  /** Payload and the share of the balloon left on the line, kg */
  mass: number
  /** Cd·A of the parachute, m² */
  dragArea: number
}

/** How a descent ended, SI. The whereabouts passed in stand at the landing. */
export interface DescentEnd {
  peakSpeed: number
  landingSpeed: number
}

/** Steps in which the free fall after burst is taken. */
const OPENING_STEPS = 10

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
  coast(load, burstRate, column, at)
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
function coast(load: FallingLoad, burstRate: number, column: Column, at: Whereabouts): void {
  column.air.sampleAltitude(at.altitude, pointAir)
  const weight = gravity(at.altitude)
  const k = (pointAir.density * load.dragArea) / load.mass
  const excess = (k * burstRate * burstRate) / (2 * weight)
  const rise = Math.log1p(excess) / k // from d(w²)/dz = −2g − k·w²
  const duration = Math.atan(Math.sqrt(excess)) / Math.sqrt((weight * k) / 2) // from dw/dt = −g − ½·k·w²
  drift(at, at.altitude, pointAir.windEast * duration, pointAir.windNorth * duration)
  at.altitude += rise
  at.elapsed += duration
}

/** The state of a falling load, stepped down through a column. */
class Fall {
  /** w², m²/s² */
  private square = 0
  peakSquare = 0
  private readonly load: FallingLoad
  private readonly column: Column
  private readonly at: Whereabouts

  constructor(load: FallingLoad, column: Column, at: Whereabouts) {
    this.load = load
    this.column = column
    this.at = at
  }

  /** m/s, downwards positive */
  get speed(): number {
    return Math.sqrt(this.square)
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

  /**
   * Two-stage Radau IIA (Hairer and Wanner, Solving Ordinary Differential Equations II, table IV.5.5) on
   * dq/dx = s·(2g − k·q) over a step `h` in x, with s = ds/dx. The equation is linear, so its two stages
   * are a pair of linear equations. Returns the duration ∫ s/√q dx, seconds.
   */
  private radau(
    h: number,
    firstScale: number,
    firstGravity: number,
    firstDensity: number,
    lastScale: number,
    lastGravity: number,
    lastDensity: number,
  ): number {
    const dragPerDensity = this.load.dragArea / this.load.mass // k/ρ
    const firstPull = h * firstScale * 2 * firstGravity
    const lastPull = h * lastScale * 2 * lastGravity
    const firstDrag = h * firstScale * firstDensity * dragPerDensity
    const lastDrag = h * lastScale * lastDensity * dragPerDensity
    // q₁ = q₀ + 5/12·f₁ − 1/12·f₂ and q₂ = q₀ + 3/4·f₁ + 1/4·f₂ with f = pull − drag·q
    const right1 = this.square + (5 * firstPull - lastPull) / 12
    const right2 = this.square + (3 * firstPull + lastPull) / 4
    const a11 = 1 + (5 / 12) * firstDrag
    const a12 = -lastDrag / 12
    const a21 = (3 / 4) * firstDrag
    const a22 = 1 + lastDrag / 4
    const determinant = a11 * a22 - a12 * a21
    const first = (right1 * a22 - a12 * right2) / determinant
    const last = (a11 * right2 - a21 * right1) / determinant
    this.square = last
    if (first > this.peakSquare) this.peakSquare = first
    if (last > this.peakSquare) this.peakSquare = last
    return h * ((0.75 * firstScale) / Math.sqrt(first) + (0.25 * lastScale) / Math.sqrt(last))
  }

  private move(to: number, duration: number, windEast: number, windNorth: number): void {
    const { at } = this
    drift(at, (at.altitude + to) / 2, windEast * duration, windNorth * duration)
    at.altitude = to
    at.elapsed += duration
  }
}
