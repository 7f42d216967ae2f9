import { emptyAirState } from './air.ts'
import { firstAbove, type Column } from './column.ts'
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
  /** Called at release and after every step; `verticalSpeed` in m/s, upwards positive. */
  record(at: Whereabouts, verticalSpeed: number, phase: Phase): void
}

/** How far, m, a recorded path may bend away from the straight line between two recorded points. */
const RECORDED_BEND = 15

/** A point is left out while the path since the last one told can have bent by no more than this, m. */
const UNTOLD_BEND = 5

const air = emptyAirState()

/**
 * Records a step that was flown from one place to another: the points where the wind breaks in between,
 * and enough more that the path never bends far from the straight line, then its end in `phase`. The
 * vertical speeds are in m/s, upwards positive; over one step they hardly differ.
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
  const between = phase === 'burst' || phase === 'ascent' ? 'ascent' : 'descent'
  const duration = to.elapsed - from.elapsed
  const pace = duration / (to.altitude - from.altitude)
  const at = { ...from }
  let told = from.elapsed
  let turned = 0
  column.at(to.altitude, air)
  const { windEast: toEast, windNorth: toNorth } = air
  column.at(from.altitude, air)
  let { windEast, windNorth } = air
  const { breakAltitudes } = column.air
  const upwards = to.altitude > from.altitude
  const first = firstAbove(breakAltitudes, Math.min(from.altitude, to.altitude))
  const end = firstAtLeast(breakAltitudes, Math.max(from.altitude, to.altitude), first)
  for (let step = 0; step <= end - first; step++) {
    // The breaks in the order of flight, then the end.
    const index = upwards ? first + step : end - 1 - step
    const last = step === end - first
    const altitude = last ? to.altitude : breakAltitudes[index]
    const changeEast = (last ? toEast : column.breakEast[index]) - windEast
    const changeNorth = (last ? toNorth : column.breakNorth[index]) - windNorth
    const start = at.altitude
    const wait = pace * (altitude - start)
    // A velocity that changes steadily by Δ over a time t bends a path from its chord by Δ·t/8.
    const change = Math.sqrt(changeEast * changeEast + changeNorth * changeNorth)
    const bend = (change * wait) / 8
    const parts = Math.max(1, Math.ceil(Math.sqrt(bend / RECORDED_BEND)))
    for (let part = 1; part <= parts; part++) {
      const middle = (part - 0.5) / parts
      const time = wait / parts
      const height = start + ((altitude - start) * part) / parts
      drift(
        at,
        (at.altitude + height) / 2,
        (windEast + middle * changeEast) * time,
        (windNorth + middle * changeNorth) * time,
      )
      at.altitude = height
      at.elapsed += time
      turned += change / parts
      // A velocity that ranges over r bends a path of duration t from its chord by at most r·t/4.
      if (height !== to.altitude && turned * (at.elapsed - told) > 4 * UNTOLD_BEND) {
        told = at.elapsed
        turned = 0
        const share = (at.elapsed - from.elapsed) / duration
        recorder.record(at, fromSpeed + share * (toSpeed - fromSpeed), between)
      }
    }
    windEast += changeEast
    windNorth += changeNorth
  }
  recorder.record(to, toSpeed, phase)
}

/** Index of the first of ascending `values`, from index `from` on, that is `value` or more. */
function firstAtLeast(values: Float64Array, value: number, from: number): number {
  let index = from
  while (index < values.length && values[index] < value) index++
  return index
}
