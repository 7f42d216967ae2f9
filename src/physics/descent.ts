import { emptyAirState, type AirState } from './air.ts'
import { type Column, type WindDeparture } from './column.ts'
import { drift, driftAlong, gravity } from './earth.ts'
import { FallMotion, type FallingLoad } from './fallMotion.ts'
import { recordStep, type PathRecorder, type Whereabouts } from './path.ts'

/** How a descent ended, SI. The whereabouts passed in stand at the landing. */
export interface DescentEnd {
  peakSpeed: number
  landingSpeed: number
}

export function emptyDescentEnd(): DescentEnd {
  return { peakSpeed: 0, landingSpeed: 0 }
}

/** Steps in which the free fall after burst is taken. */
export const OPENING_STEPS = 10

const slabAir = emptyAirState()
const thirdAir = emptyAirState()
const pointAir = emptyAirState()

/**
 * Brings a load down from its burst at `at`, where it still rises at `burstRate` m/s, to the landing
 * altitude in m, which must lie below. Moves `at` to the landing and fills `end`; allocates nothing
 * without a recorder.
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
  end: DescentEnd,
  recorder?: PathRecorder,
  departure?: WindDeparture,
): void {
  column.air.sampleAltitude(at.altitude, pointAir)
  coast(load, burstRate, pointAir, at)
  fall.beginIn(column, load, at, departure)
  if (recorder) {
    column.at(at.altitude, pointAir)
    recorder.record(at, 0, pointAir.windEast, pointAir.windNorth, 'descent')
  }

  // √q starts from nothing, so the first slabs are stepped in σ = √s, in which the time is smooth.
  const apex = at.altitude
  const settled = Math.max(landingAltitude, column.altitude(column.slabAt(apex) - 1))
  const last = Math.sqrt(apex - settled)
  for (let step = 1; step <= OPENING_STEPS; step++) {
    const to = step === OPENING_STEPS ? settled : apex - ((step * last) / OPENING_STEPS) ** 2
    fall.openingStep(apex, to)
    const phase = to > landingAltitude ? 'descent' : 'landing'
    recorder?.record(at, -fall.speed, pointAir.windEast, pointAir.windNorth, phase)
  }

  if (at.altitude > landingAltitude) {
    fall.wholeSlabs(column.slabBelow(at.altitude), column.slabAt(landingAltitude), recorder)
    const from = { ...at }
    const fromSpeed = fall.speed
    fall.slabStep(column.slabBelow(at.altitude), landingAltitude)
    if (recorder) recordStep(recorder, column, from, -fromSpeed, at, -fall.speed, 'landing')
  }
  end.peakSpeed = Math.sqrt(fall.peakSquare)
  end.landingSpeed = fall.speed
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

/** Series over the slabs of a column, kept for the next descent. */
let drifts = {
  altitude: new Float64Array(0),
  east: new Float64Array(0),
  north: new Float64Array(0),
}
let durations = new Float64Array(0)
let speeds = new Float64Array(0)

/** The state of a falling load, stepped down through a column. */
class Fall extends FallMotion {
  private column!: Column
  private at!: Whereabouts
  private departure: WindDeparture | undefined

  beginIn(column: Column, load: FallingLoad, at: Whereabouts, departure?: WindDeparture): void {
    if (drifts.altitude.length < column.count) {
      drifts = {
        altitude: new Float64Array(column.count),
        east: new Float64Array(column.count),
        north: new Float64Array(column.count),
      }
      durations = new Float64Array(column.count)
      speeds = new Float64Array(column.count)
    }
    this.begin(load)
    this.column = column
    this.at = at
    this.departure = departure
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
      this.column.slabBelow(this.at.altitude),
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
    const third = from - (from - to) / 3
    column.air.sampleAltitude(third, thirdAir)
    column.at(to, pointAir)
    const duration = this.radau(
      from - to,
      1,
      gravity(third),
      thirdAir.density,
      1,
      gravity(to),
      pointAir.density,
    )
    column.mean(to, from, slabAir)
    this.move(slab, to, duration, slabAir.windEast, slabAir.windNorth)
  }

  /** Down from slab `first` to slab `last` by whole slabs, but not the last: from the tables. */
  wholeSlabs(first: number, last: number, recorder?: PathRecorder): void {
    const { at, column, departure, dragPerDensity } = this
    const { thickness, thirdGravity, thirdDensity, edgeGravity, edgeDensity } = column
    const { windEast, windNorth } = column
    const { altitude, east, north } = drifts
    let { square, peakSquare } = this
    const firstSpeed = this.speed
    let elapsed = 0
    for (let slab = first; slab > last; slab--) {
      // As `radau`, written out with both scales 1.
      const firstPull = thickness * 2 * thirdGravity[slab]
      const lastPull = thickness * 2 * edgeGravity[slab]
      const firstDrag = thickness * thirdDensity[slab] * dragPerDensity
      const lastDrag = thickness * edgeDensity[slab] * dragPerDensity
      const right1 = square + (5 * firstPull - lastPull) / 12
      const right2 = square + (3 * firstPull + lastPull) / 4
      const a11 = 1 + (5 / 12) * firstDrag
      const a12 = -lastDrag / 12
      const a21 = (3 / 4) * firstDrag
      const a22 = 1 + lastDrag / 4
      const determinant = a11 * a22 - a12 * a21
      const third = (right1 * a22 - a12 * right2) / determinant
      square = (a11 * right2 - a21 * right1) / determinant
      if (third > peakSquare) peakSquare = third
      if (square > peakSquare) peakSquare = square
      const duration = thickness * (0.75 / Math.sqrt(third) + 0.25 / Math.sqrt(square))
      elapsed += duration
      const step = first - slab
      durations[step] = duration
      speeds[step] = Math.sqrt(square)
      altitude[step] = column.altitude(slab) + thickness / 2
      east[step] = (windEast[slab] + (departure ? departure.east[slab] : 0)) * duration
      north[step] = (windNorth[slab] + (departure ? departure.north[slab] : 0)) * duration
    }
    this.square = square
    this.peakSquare = peakSquare
    if (recorder) {
      this.recordSlabs(first, last, firstSpeed, recorder)
      return
    }
    driftAlong(at, 0, first - last, altitude, east, north)
    at.elapsed += elapsed
    at.altitude = column.altitude(last + 1)
  }

  /** Moves by whole slabs through their durations and drifts, telling a recorder of the way. */
  private recordSlabs(
    first: number,
    last: number,
    firstSpeed: number,
    recorder: PathRecorder,
  ): void {
    const { at, column } = this
    let speed = firstSpeed
    for (let step = 0; step < first - last; step++) {
      const from = { ...at }
      driftAlong(at, step, step + 1, drifts.altitude, drifts.east, drifts.north)
      at.elapsed += durations[step]
      at.altitude = column.altitude(first - step)
      recordStep(recorder, column, from, -speed, at, -speeds[step], 'descent')
      speed = speeds[step]
    }
  }

  private move(
    slab: number,
    to: number,
    duration: number,
    windEast: number,
    windNorth: number,
  ): void {
    const { at, departure } = this
    const east = windEast + (departure ? departure.east[slab] : 0)
    const north = windNorth + (departure ? departure.north[slab] : 0)
    drift(at, (at.altitude + to) / 2, east * duration, north * duration)
    at.altitude = to
    at.elapsed += duration
  }
}

/** One for all descents, which never run at the same time. */
const fall = new Fall()
