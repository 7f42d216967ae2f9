import { type AirState, type VaryingAir } from './air.ts'
import { drift, type Position } from './earth.ts'
import { type Whereabouts } from './path.ts'

/** A flight train on its way through air that varies along it: samples where it is and where it will be. */
export class PathSampler {
  private readonly air: VaryingAir
  /** Release, s since 1970 UTC. */
  private readonly time: number
  private readonly at: Whereabouts
  private readonly ahead: Position = { latitude: 0, longitude: 0 }

  constructor(air: VaryingAir, time: number, at: Whereabouts) {
    this.air = air
    this.time = time
    this.at = at
  }

  /** Fills `out` with the air where the train is. */
  sampleHere(out: AirState): void {
    const { at } = this
    this.air.sample(at.latitude, at.longitude, at.altitude, this.time + at.elapsed, out)
  }

  /** Fills `out` with the air at an altitude in m, `duration` s from now and `east` and `north` m away. */
  sampleAhead(
    altitude: number,
    duration: number,
    east: number,
    north: number,
    out: AirState,
  ): void {
    const { at, ahead } = this
    ahead.latitude = at.latitude
    ahead.longitude = at.longitude
    drift(ahead, altitude, east, north)
    const time = this.time + at.elapsed + duration
    this.air.sample(ahead.latitude, ahead.longitude, altitude, time, out)
  }

  /** Moves the train to an altitude in m in `duration` s, drifting `east` and `north` metres. */
  move(altitude: number, duration: number, east: number, north: number): void {
    const { at } = this
    drift(at, (at.altitude + altitude) / 2, east, north)
    at.altitude = altitude
    at.elapsed += duration
  }
}

/**
 * The end of the next step from an altitude towards a kink of the air, up or down, m: the stretch between
 * is cut into equal steps no longer than `longest`.
 */
export function stepTowards(from: number, kink: number, longest: number): number {
  const stretch = kink - from
  if (!Number.isFinite(stretch)) return from + Math.sign(stretch) * longest
  return from + stretch / Math.ceil(Math.abs(stretch) / longest)
}

/** How far, m, a recorded path may bend away from the straight line between two recorded steps. */
const RECORDED_BEND = 20

/**
 * Height, m, that a recorded flight may step through at a vertical `speed` in m/s where the wind ranges
 * over `windRange` m/s: such a velocity bends a path of duration t from its chord by at most r·t/4.
 */
export function recordedStep(windRange: number, speed: number): number {
  return (4 * RECORDED_BEND * speed) / windRange
}
