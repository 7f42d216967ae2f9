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
  singleAltitude[0] = altitude
  singleEast[0] = east
  singleNorth[0] = north
  driftAlong(position, 0, 1, singleAltitude, singleEast, singleNorth)
}

/** Moves a position by drifts [first, end) of a series in turn: `drift` without a call for each. */
export function driftAlong(
  position: Position,
  first: number,
  end: number,
  altitudes: Float64Array,
  easts: Float64Array,
  norths: Float64Array,
): void {
  let { latitude, longitude } = position
  for (let i = first; i < end; i++) {
    const altitude = altitudes[i]
    // Half a step at the equator's radius finds the middle well enough: it only sets the radii.
    const middle = latitude + norths[i] / (2 * SEMI_MAJOR_AXIS)
    const node = Math.round((middle + LATITUDE_SPAN) * NODES)
    const d = middle + LATITUDE_SPAN - node / NODES
    const at = node * NODE_VALUES
    const square = d * d
    const meridional = nodes[at] + d * nodes[at + 1] + square * nodes[at + 2]
    const primeVertical = nodes[at + 3] + d * nodes[at + 4] + square * nodes[at + 5]
    const cosine =
      nodes[at + 6] * (1 - (square / 2) * (1 - square / 12)) -
      nodes[at + 7] * d * (1 - (square / 6) * (1 - square / 20))
    latitude += norths[i] / (meridional + altitude)
    longitude += easts[i] / ((primeVertical + altitude) * Math.max(Math.abs(cosine), 1e-9)) // the pole itself has no east
    if (Math.abs(latitude) > Math.PI / 2) {
      latitude = Math.sign(latitude) * Math.PI - latitude
      longitude += Math.PI
    }
  }
  position.latitude = latitude
  position.longitude = longitude
}

/** Latitudes of the table's nodes reach from −LATITUDE_SPAN to LATITUDE_SPAN radians. */
const LATITUDE_SPAN = 2
/** Nodes per radian. */
const NODES = 64
/**
 * At each node M and N with their first and half their second derivatives by latitude, and the cosine
 * and sine: Taylor's series from the nearest node gives the radii to a centimetre.
 */
const NODE_VALUES = 8
const nodes = new Float64Array((2 * LATITUDE_SPAN * NODES + 1) * NODE_VALUES)
for (let node = 0; node * NODE_VALUES < nodes.length; node++) {
  const latitude = node / NODES - LATITUDE_SPAN
  const sine = Math.sin(latitude)
  const cosine = Math.cos(latitude)
  const squash = 1 - ECCENTRICITY_SQUARED * sine * sine
  const slope = -2 * ECCENTRICITY_SQUARED * sine * cosine // of squash
  const bend = -2 * ECCENTRICITY_SQUARED * (cosine * cosine - sine * sine) // of slope
  const primeVertical = SEMI_MAJOR_AXIS / Math.sqrt(squash)
  const meridional = (primeVertical * (1 - ECCENTRICITY_SQUARED)) / squash
  const relative = slope / squash
  nodes.set(
    [
      meridional,
      -1.5 * meridional * relative,
      (meridional * (3.75 * relative * relative - 1.5 * (bend / squash))) / 2,
      primeVertical,
      -0.5 * primeVertical * relative,
      (primeVertical * (0.75 * relative * relative - 0.5 * (bend / squash))) / 2,
      cosine,
      sine,
    ],
    node * NODE_VALUES,
  )
}

/** The series of a single drift. */
const singleAltitude = new Float64Array(1)
const singleEast = new Float64Array(1)
const singleNorth = new Float64Array(1)

/** Longitude in radians brought into [-π, π). */
export function wrapLongitude(longitude: number): number {
  if (longitude >= -Math.PI && longitude < Math.PI) return longitude
  const turned = (longitude + Math.PI) % (2 * Math.PI)
  return (turned < 0 ? turned + 2 * Math.PI : turned) - Math.PI
}
