import { type Position } from '../physics/earth.ts'

/** WGS 84 semi-major axis, m, and first eccentricity squared. NIMA TR8350.2, table 3.1 and 3.3. */
const SEMI_MAJOR_AXIS = 6_378_137
const ECCENTRICITY_SQUARED = 6.69437999014e-3

/**
 * East and north of the mean of some places, m: the orthographic projection of the ellipsoid on the
 * tangent plane there, which shortens 100 km by 4 m. Poles and the antimeridian are places like others.
 */
export class LocalPlane {
  readonly origin: Position
  private readonly east: readonly [number, number, number]
  private readonly north: readonly [number, number, number]
  private readonly up: readonly [number, number, number]
  private readonly centre = new Float64Array(3)
  private readonly scratch = new Float64Array(3)
  /** Radii of curvature at the origin, m: prime vertical and meridional. */
  private readonly primeVertical: number
  private readonly meridional: number

  /** `places`: `count` pairs of latitude and longitude, radians, `stride` numbers apart; NaN is skipped. */
  constructor(places: Float64Array, count: number, stride: number) {
    const mean = new Float64Array(3)
    const point = this.scratch
    let flown = 0
    for (let i = 0; i < count; i++) {
      const latitude = places[i * stride]
      if (Number.isNaN(latitude)) continue
      toCartesian(latitude, places[i * stride + 1], point)
      for (let axis = 0; axis < 3; axis++) mean[axis] += point[axis]
      flown++
    }
    this.origin = toGeographic(mean[0] / flown, mean[1] / flown, mean[2] / flown)
    const { latitude, longitude } = this.origin
    const [s, c] = [Math.sin(latitude), Math.cos(latitude)]
    const [sl, cl] = [Math.sin(longitude), Math.cos(longitude)]
    this.east = [-sl, cl, 0]
    this.north = [-s * cl, -s * sl, c]
    this.up = [c * cl, c * sl, s]
    toCartesian(latitude, longitude, this.centre)
    const squash = 1 - ECCENTRICITY_SQUARED * s * s
    this.primeVertical = SEMI_MAJOR_AXIS / Math.sqrt(squash)
    this.meridional = (this.primeVertical * (1 - ECCENTRICITY_SQUARED)) / squash
  }

  /** Writes east and north, m, of a place in radians to `out` from `at` on. */
  project(latitude: number, longitude: number, out: Float64Array, at: number): void {
    const { scratch, centre, east, north } = this
    toCartesian(latitude, longitude, scratch)
    const x = scratch[0] - centre[0]
    const y = scratch[1] - centre[1]
    const z = scratch[2] - centre[2]
    out[at] = east[0] * x + east[1] * y
    out[at + 1] = north[0] * x + north[1] * y + north[2] * z
  }

  /** The place, radians, that lies `e` m east and `n` m north. */
  unproject(e: number, n: number): Position {
    const { centre, east, north, up } = this
    // The ellipsoid falls away from the plane by e²/2N + n²/2M.
    const sink = (e * e) / (2 * this.primeVertical) + (n * n) / (2 * this.meridional)
    const at = (axis: 0 | 1 | 2) =>
      centre[axis] + e * east[axis] + n * north[axis] - sink * up[axis]
    return toGeographic(at(0), at(1), at(2))
  }
}

/** Earth-centred coordinates, m, of a place on the ellipsoid. */
function toCartesian(latitude: number, longitude: number, out: Float64Array): void {
  const sine = Math.sin(latitude)
  const cosine = Math.cos(latitude)
  const radius = SEMI_MAJOR_AXIS / Math.sqrt(1 - ECCENTRICITY_SQUARED * sine * sine)
  out[0] = radius * cosine * Math.cos(longitude)
  out[1] = radius * cosine * Math.sin(longitude)
  out[2] = radius * (1 - ECCENTRICITY_SQUARED) * sine
}

/** Geographic place of a point near the ellipsoid (Bowring, Survey Review 23, 1976, p. 323). */
function toGeographic(x: number, y: number, z: number): Position {
  const flat = Math.sqrt(1 - ECCENTRICITY_SQUARED)
  const semiMinor = SEMI_MAJOR_AXIS * flat
  const axis = Math.hypot(x, y)
  const reduced = Math.atan2(z, axis * flat)
  const second = ECCENTRICITY_SQUARED / (1 - ECCENTRICITY_SQUARED)
  return {
    latitude: Math.atan2(
      z + second * semiMinor * Math.sin(reduced) ** 3,
      axis - ECCENTRICITY_SQUARED * SEMI_MAJOR_AXIS * Math.cos(reduced) ** 3,
    ),
    longitude: Math.atan2(y, x),
  }
}
