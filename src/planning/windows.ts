import { getPosition } from 'suncalc'
import { type Position } from '../physics/earth.ts'
import { geodesicLine } from './geodesic.ts'
import { LocalPlane } from './localPlane.ts'
import { isInside, type Region } from './regions.ts'
import { type TimeFigures } from './survey.ts'

const DEGREE = Math.PI / 180

/** What a release time must keep to; what is not given is not asked. SI, angles in radians. */
export interface WindowLimits {
  /** The landing lies in one of these */
  landingInside?: readonly Region[]
  /** The landing lies in none of these */
  landingOutside?: readonly Region[]
  /** Distance of the landing from a point, m */
  landingDistance?: { from: Position; atLeast?: number; atMost?: number }
  /** The sun stands at least so high at the landing */
  sunElevationAtLanding?: number
  /** m above mean sea level */
  burstAltitude?: { atLeast?: number; atMost?: number }
  /** Smallest area that holds 90 % of the landings, m² */
  regionArea?: number
  /** m/s */
  groundWind?: number
}

export type LimitName =
  | 'landingInside'
  | 'landingOutside'
  | 'landingDistanceAtLeast'
  | 'landingDistanceAtMost'
  | 'sunElevationAtLanding'
  | 'burstAltitudeAtLeast'
  | 'burstAltitudeAtMost'
  | 'regionArea'
  | 'groundWind'

/** How a release time stands to one limit. */
export interface LimitCheck {
  limit: LimitName
  value: number
  bound: number
  /** By how much it is kept, or, negative, failed; in the limit's own unit */
  margin: number
}

/**
 * What counts as much as what when times are ranked: a margin of this size in one limit weighs like a
 * margin of this size in another. An assumption.
 */
const SCALE: Record<LimitName, number> = {
  landingInside: 5000,
  landingOutside: 5000,
  landingDistanceAtLeast: 5000,
  landingDistanceAtMost: 5000,
  sunElevationAtLanding: 5 * DEGREE,
  burstAltitudeAtLeast: 1000,
  burstAltitudeAtMost: 1000,
  regionArea: 100e6,
  groundWind: 2,
}

/** Apparent elevation of the sun in radians, refraction included, at a place and a time in s since 1970 UTC. */
export function sunElevation(place: Position, time: number): number {
  const { altitude } = getPosition(
    new Date(time * 1000),
    place.latitude / DEGREE,
    place.longitude / DEGREE,
  )
  return altitude * DEGREE
}

/** How one release time, s since 1970 UTC, stands to every limit asked. */
export function checkLimits(
  figures: TimeFigures,
  releaseTime: number,
  limits: WindowLimits,
): LimitCheck[] {
  const { landing, burstAltitude, groundWind, regionArea } = figures
  const checks: LimitCheck[] = []
  const atLeast = (limit: LimitName, value: number, bound: number | undefined) => {
    if (bound !== undefined) checks.push({ limit, value, bound, margin: value - bound })
  }
  const atMost = (limit: LimitName, value: number, bound: number | undefined) => {
    if (bound !== undefined) checks.push({ limit, value, bound, margin: bound - value })
  }
  const { landingInside, landingOutside, landingDistance } = limits
  if (landingInside) atLeast('landingInside', depthInside(landingInside, landing), 0)
  if (landingOutside) atLeast('landingOutside', -depthInside(landingOutside, landing), 0)
  if (landingDistance) {
    const { distance } = geodesicLine(landingDistance.from, landing)
    atLeast('landingDistanceAtLeast', distance, landingDistance.atLeast)
    atMost('landingDistanceAtMost', distance, landingDistance.atMost)
  }
  const sun = sunElevation(landing, releaseTime + landing.elapsed)
  atLeast('sunElevationAtLanding', sun, limits.sunElevationAtLanding)
  atLeast('burstAltitudeAtLeast', burstAltitude, limits.burstAltitude?.atLeast)
  atMost('burstAltitudeAtMost', burstAltitude, limits.burstAltitude?.atMost)
  if (regionArea !== null) atMost('regionArea', regionArea, limits.regionArea)
  atMost('groundWind', groundWind, limits.groundWind)
  return checks
}

/**
 * The order of release times, best first, as indices: fewest failed limits, then the least sum of what
 * they fail by, then the greatest of the narrowest margins; a time that cannot be flown (null) last.
 */
export function rank(times: readonly (readonly LimitCheck[] | null)[]): number[] {
  const scores = times.map((checks) => {
    if (!checks) return [Infinity, Infinity, Infinity]
    const margins = checks.map(({ limit, margin }) => margin / SCALE[limit])
    const failed = margins.filter((margin) => margin < 0)
    const shortfall = failed.reduce((sum, margin) => sum - margin, 0)
    return [failed.length, shortfall, -Math.min(Infinity, ...margins)]
  })
  return [...times.keys()].sort((a, b) => {
    for (let i = 0; i < 3; i++) {
      if (scores[a][i] !== scores[b][i]) return scores[a][i] - scores[b][i]
    }
    return a - b
  })
}

/** How deep, m, a place lies inside the nearest of some regions; negative: how far outside all of them. */
export function depthInside(regions: readonly Region[], place: Position): number {
  let nearest = Infinity
  let inside = false
  for (const region of regions) {
    inside ||= isInside(region, place.latitude, place.longitude)
    nearest = Math.min(nearest, distanceToEdge(region, place))
  }
  return inside ? nearest : -nearest
}

/** Distance, m, of a place from the nearest edge of a region, in the plane that touches the earth there. */
function distanceToEdge(region: Region, place: Position): number {
  const plane = new LocalPlane(Float64Array.of(place.latitude, place.longitude), 1, 2)
  const ends = new Float64Array(4)
  let nearest = Infinity
  for (const ring of region.polygons.flat()) {
    for (let i = 1; i < ring.length; i++) {
      plane.project(ring[i - 1][1], ring[i - 1][0], ends, 0)
      plane.project(ring[i][1], ring[i][0], ends, 2)
      nearest = Math.min(nearest, distanceToSegment(ends))
    }
  }
  return nearest
}

/** Distance of the origin from the segment between two points, their coordinates in turn. */
function distanceToSegment([x1, y1, x2, y2]: Float64Array): number {
  const dx = x2 - x1
  const dy = y2 - y1
  const square = dx * dx + dy * dy
  const along = square > 0 ? Math.min(1, Math.max(0, -(x1 * dx + y1 * dy) / square)) : 0
  return Math.hypot(x1 + along * dx, y1 + along * dy)
}
