import { compassPoint } from './compass.ts'
import { reading } from './readings.ts'

/** A distance as short as it is exact enough. */
export function distanceWords(metres: number): string {
  return reading('distance', metres, metres < 20_000 ? 1 : 0)
}

/** Nearer than this, m, a place has no direction from the site. */
export const AT_THE_SITE = 50

/** Where something lies, seen from the site: "168 km east". */
export function fromSite(metres: number, bearingDeg: number): string {
  if (metres < AT_THE_SITE) return 'at the site'
  return `${distanceWords(metres)} ${compassPoint(bearingDeg)}`
}

/** A span of time in hours and minutes. */
export function durationWords(seconds: number): string {
  const minutes = Math.round(seconds / 60)
  if (minutes < 60) return `${minutes} min`
  return `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}
