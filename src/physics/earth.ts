import { STANDARD_GRAVITY } from './constants.ts'

/** Effective earth radius of the geopotential, m. US Standard Atmosphere 1976, eq. 18. */
const GEOPOTENTIAL_RADIUS = 6_356_766

/** WGS 84 semi-major axis, m, and first eccentricity squared. NIMA TR8350.2, table 3.1 and 3.3. */
const SEMI_MAJOR_AXIS = 6_378_137
const ECCENTRICITY_SQUARED = 6.69437999014e-3

/** A place on the ellipsoid, radians. Longitude runs on past ±π until it is wrapped for an answer. */
export interface Position {
  latitude: number
  longitude: number
}

/** Geopotential height in m of a geometric altitude in m above mean sea level. */
export function geopotentialHeight(altitude: number): number {
  return (GEOPOTENTIAL_RADIUS * altitude) / (GEOPOTENTIAL_RADIUS + altitude) // US Std Atm 1976, eq. 18
}

/** Geometric altitude in m of a geopotential height in m. */
export function geometricAltitude(height: number): number {
  return (GEOPOTENTIAL_RADIUS * height) / (GEOPOTENTIAL_RADIUS - height) // US Std Atm 1976, eq. 19
}

/** Acceleration of gravity in m/s² at a geometric altitude in m. */
export function gravity(altitude: number): number {
  const ratio = GEOPOTENTIAL_RADIUS / (GEOPOTENTIAL_RADIUS + altitude)
  return STANDARD_GRAVITY * ratio * ratio // US Std Atm 1976, eq. 17
}

/**
 * Moves a position by a drift of `east` and `north` metres at `altitude` metres, in place.
 * dφ = north/(M+z), dλ = east/((N+z)·cos φ), φ taken at mid-step; M and N are the meridional and
 * prime-vertical radii of curvature (Torge and Müller, Geodesy, 4th ed., eq. 4.13 and 4.15).
 */
export function drift(position: Position, altitude: number, east: number, north: number): void {
  const start = position.latitude
  const sine = Math.sin(start + north / (2 * (SEMI_MAJOR_AXIS + altitude)))
  const cosine = Math.max(Math.sqrt(1 - sine * sine), 1e-9) // the pole itself has no east
  const squash = 1 - ECCENTRICITY_SQUARED * sine * sine
  const primeVertical = SEMI_MAJOR_AXIS / Math.sqrt(squash)
  const meridional = (primeVertical * (1 - ECCENTRICITY_SQUARED)) / squash
  position.latitude = start + north / (meridional + altitude)
  position.longitude += east / ((primeVertical + altitude) * cosine)
  if (Math.abs(position.latitude) > Math.PI / 2) {
    position.latitude = Math.sign(position.latitude) * Math.PI - position.latitude
    position.longitude += Math.PI
  }
}

/** Longitude in radians brought into [-π, π). */
export function wrapLongitude(longitude: number): number {
  if (longitude >= -Math.PI && longitude < Math.PI) return longitude
  const turned = (longitude + Math.PI) % (2 * Math.PI)
  return (turned < 0 ? turned + 2 * Math.PI : turned) - Math.PI
}
