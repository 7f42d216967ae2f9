import geodesic from 'geographiclib-geodesic'
import { geometricAltitude } from '../physics/earth.ts'
import { type SoundingLevel } from '../physics/sounding.ts'
import { type Sounding } from './profile.ts'

const DEGREE = Math.PI / 180

/** The flight that a sounding was, as far as its levels tell. */
export interface ObservedAscent {
  /** Between the lowest and the highest level that tell when they were reached */
  durationS: number
  lowestAltitudeM: number
  highestAltitudeM: number
  /** Altitude gained over time */
  meanRateMs: number
  /** Where the highest level that tells a displacement stood; null where none does */
  drift: ObservedDrift | null
}

/** Displacement from the release; distance and bearing along the geodesic, where the site is known. */
export interface ObservedDrift {
  altitudeM: number
  latitudeDeg: number
  longitudeDeg: number
  distanceM: number
  bearingDeg: number
}

/**
 * What a sounding tells of its own flight, or null where fewer than two levels tell an elapsed time
 * or time does not pass between them.
 */
export function observedAscent(sounding: Sounding): ObservedAscent | null {
  const timed = sounding.levels.filter(isTimed)
  const bottom = timed.at(0)
  const top = timed.at(-1)
  if (!bottom || !top || top.elapsed <= bottom.elapsed) return null
  const lowest = geometricAltitude(bottom.geopotentialHeight)
  const highest = geometricAltitude(top.geopotentialHeight)
  const duration = top.elapsed - bottom.elapsed
  return {
    durationS: duration,
    lowestAltitudeM: lowest,
    highestAltitudeM: highest,
    meanRateMs: (highest - lowest) / duration,
    drift: observedDrift(sounding),
  }
}

function observedDrift({ levels, latitude, longitude }: Sounding): ObservedDrift | null {
  const level = levels.findLast(({ displacement }) => displacement !== undefined)
  if (!level?.displacement || latitude === null || longitude === null) return null
  const north = level.displacement.latitude
  const east = level.displacement.longitude
  const there = { latitude: (latitude + north) / DEGREE, longitude: (longitude + east) / DEGREE }
  if (Math.abs(there.latitude) > 90) return null
  const { s12, azi1 } = geodesic.Geodesic.WGS84.Inverse(
    latitude / DEGREE,
    longitude / DEGREE,
    there.latitude,
    there.longitude,
  )
  if (s12 === undefined || azi1 === undefined) return null
  return {
    altitudeM: geometricAltitude(level.geopotentialHeight),
    latitudeDeg: there.latitude,
    longitudeDeg: there.longitude - 360 * Math.floor((there.longitude + 180) / 360),
    distanceM: s12,
    bearingDeg: azi1 < 0 ? azi1 + 360 : azi1,
  }
}

function isTimed(level: SoundingLevel): level is SoundingLevel & { elapsed: number } {
  return level.elapsed !== undefined
}
