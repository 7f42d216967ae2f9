import { emptyAirState } from './air.ts'
import { type Column } from './column.ts'
import { drift, type Position } from './earth.ts'

/** Where the flight train is, while it flies. Mutable: one per flight, moved along by ascent and descent. */
export interface Whereabouts extends Position {
  /** Geometric m above mean sea level */
  altitude: number
  /** Seconds since release */
  elapsed: number
}

export type Phase = 'ascent' | 'burst' | 'descent' | 'landing'

/** Somebody who wants the flight's path and not just its ends. */
export interface PathRecorder {
  /** Called at release and after every step; speeds in m/s, the vertical one upwards positive. */
  record(
    at: Whereabouts,
    verticalSpeed: number,
    windEast: number,
    windNorth: number,
    phase: Phase,
  ): void
}

/** How far, m, a recorded path may stray from the straight line between two recorded points. */
const STRAY = 15

const air = emptyAirState()

/**
 * Records a step that was flown from one place to another at a steady pace within one slab: the points
 * between, where the path would else stray from the straight line, then its end in `phase`. The vertical
 * speeds are in m/s, upwards positive; over one step they hardly differ.
 */
export function recordStep(
  recorder: PathRecorder,
  column: Column,
  from: Whereabouts,
  fromSpeed: number,
  to: Whereabouts,
  toSpeed: number,
  phase: Phase,
): void {
  const { altitudes, windEast, windNorth, stray, firstOf } = column.bends
  const between = phase === 'burst' || phase === 'ascent' ? 'ascent' : 'descent'
  const bottom = Math.min(from.altitude, to.altitude)
  const top = Math.max(from.altitude, to.altitude)
  const upwards = to.altitude > from.altitude
  const slab = column.slabAt(bottom)
  const first = firstOf[slab]
  const end = firstOf[slab + 1]
  const pace = (to.elapsed - from.elapsed) / (top - bottom)

  const at = { ...from }
  column.at(from.altitude, air)
  let { windEast: lastEast, windNorth: lastNorth } = air
  let lastAltitude = from.altitude
  let east = 0
  let north = 0
  for (let step = 0; step < end - first; step++) {
    const point = upwards ? first + step : end - 1 - step
    const altitude = altitudes[point]
    if (altitude <= bottom || altitude >= top) continue
    const wait = pace * Math.abs(altitude - lastAltitude)
    east += ((lastEast + windEast[point]) / 2) * wait
    north += ((lastNorth + windNorth[point]) / 2) * wait
    lastEast = windEast[point]
    lastNorth = windNorth[point]
    lastAltitude = altitude
    if (stray[point] * pace < STRAY) continue
    drift(at, (at.altitude + altitude) / 2, east, north)
    east = 0
    north = 0
    at.altitude = altitude
    const share = Math.abs(altitude - from.altitude) / (top - bottom)
    at.elapsed = from.elapsed + share * (to.elapsed - from.elapsed)
    const speed = fromSpeed + share * (toSpeed - fromSpeed)
    recorder.record(at, speed, lastEast, lastNorth, between)
  }
  column.at(to.altitude, air)
  recorder.record(to, toSpeed, air.windEast, air.windNorth, phase)
}
