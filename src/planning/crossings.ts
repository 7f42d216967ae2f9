import { type Air, emptyAirState } from '../physics/air.ts'
import { flightLevelPressure } from '../physics/flightLevel.ts'
import { wrapLongitude } from '../physics/earth.ts'
import { type Whereabouts } from '../physics/path.ts'
import { geodesicLine, type GeodesicLine } from './geodesic.ts'

/** A level that an authority asks about: an altitude in geometric m, or a flight level in hundreds of feet. */
export type AskedLevel =
  { kind: 'altitude'; altitude: number } | { kind: 'flight-level'; flightLevel: number }

/** Where and when a flight passes a level. Angles in radians. */
export interface Crossing extends Whereabouts {
  level: AskedLevel
  way: 'up' | 'down'
  /** Of the air there, Pa */
  pressure: number
}

/** A point of the track with the pressure of its air. */
interface PressedPoint extends Whereabouts {
  logPressure: number
}

/**
 * Every passage of the levels asked for, in the order of flight: on straight lines between the points of
 * a track, pressure in its logarithm. `releaseTime` in s since 1970 UTC.
 */
export function crossings(
  track: readonly Whereabouts[],
  air: Air,
  releaseTime: number,
  levels: readonly AskedLevel[],
): Crossing[] {
  const state = emptyAirState()
  const points = track.map((point): PressedPoint => {
    const { latitude, longitude, altitude, elapsed } = point
    air.sample(latitude, longitude, altitude, releaseTime + elapsed, state)
    return { ...point, logPressure: Math.log(state.pressure) }
  })
  return levels
    .flatMap((level) => passages(points, level))
    .sort((one, other) => one.elapsed - other.elapsed)
}

function passages(points: readonly PressedPoint[], level: AskedLevel): Crossing[] {
  // How high above the level a point is, in m or in −ln p: both rise with altitude.
  const above =
    level.kind === 'altitude'
      ? (point: PressedPoint) => point.altitude - level.altitude
      : (point: PressedPoint) =>
          Math.log(flightLevelPressure(level.flightLevel)) - point.logPressure
  const found: Crossing[] = []
  for (let index = 1; index < points.length; index++) {
    const [from, to] = [points[index - 1], points[index]]
    const [start, end] = [above(from), above(to)]
    if (start < 0 === end < 0) continue
    const share = start / (start - end)
    const mix = (one: number, other: number) => one + (other - one) * share
    found.push({
      level,
      way: end > start ? 'up' : 'down',
      elapsed: mix(from.elapsed, to.elapsed),
      latitude: mix(from.latitude, to.latitude),
      longitude: wrapLongitude(
        from.longitude + wrapLongitude(to.longitude - from.longitude) * share,
      ),
      altitude: mix(from.altitude, to.altitude),
      pressure: Math.exp(mix(from.logPressure, to.logPressure)),
    })
  }
  return found
}

/** How far a flight reaches. */
export interface Extent {
  /** From the launch to the point of the track that is farthest from it */
  farthest: GeodesicLine
  /** Radians; where the flight crosses the antimeridian, west is greater than east */
  north: number
  south: number
  east: number
  west: number
}

/** How far the points of a track, at least one, reach from the first of them. */
export function extent(track: readonly Whereabouts[]): Extent {
  const [launch] = track
  const lines = track.map((point) => geodesicLine(launch, point))
  const farthest = lines.reduce((one, other) => (other.distance > one.distance ? other : one))
  const latitudes = track.map((point) => point.latitude)
  // Eastward of the launch, so that the antimeridian does not cut the flight in two.
  const eastward = track.map((point) => wrapLongitude(point.longitude - launch.longitude))
  return {
    farthest,
    north: Math.max(...latitudes),
    south: Math.min(...latitudes),
    east: wrapLongitude(launch.longitude + Math.max(...eastward)),
    west: wrapLongitude(launch.longitude + Math.min(...eastward)),
  }
}
