import { type Column } from '../physics/column.ts'
import { wrapLongitude, type Position } from '../physics/earth.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { causesOf, type Cause } from './causes.ts'
import { Cloud, quantile, type CloudEllipse } from './cloud.ts'
import { densestRegions } from './densestRegions.ts'
import { LocalPlane } from './localPlane.ts'
import { MEMBER, MEMBER_VALUES, MemberFlights, REPLICATES } from './memberFlights.ts'
import { isInside, type Region } from './regions.ts'
import { type Spread } from './spread.ts'

/** Shares of the members that ellipses and regions are drawn for. */
export const SHARES = [0.5, 0.9, 0.95] as const

/** Values below which 5, 50 and 95 % of the members lie. */
export interface Quantiles {
  p05: number
  p50: number
  p95: number
}

/** The smallest area that holds a share of the landings. */
export interface RegionOfShare extends Region {
  share: number
  /** m² */
  area: number
}

/** How sure a prediction is. SI, angles in radians. */
export interface Dispersion {
  members: number
  /** Members that do not fly: no free lift, no burst below the ceiling, or a burst too low */
  notFlown: number
  burstAltitude: Quantiles
  landing: {
    mean: Position
    /** Since the planned release, s */
    elapsed: Quantiles
    ellipses: CloudEllipse[]
    regions: RegionOfShare[]
    /** Latitude and longitude of each flown member's landing, in turn */
    points: Float64Array
  }
  /** Share of the flown members that land inside each region asked for */
  inRegions: { name: string | null; share: number }[]
  causes: Cause[]
  /** Standard error of the mean landing place, m, from the scatter between independent scramblings */
  standardError: number
}

/** Flies members [first, end) of a dispersion into rows of MEMBER_VALUES numbers of `out`. */
export function flyMembers(
  flights: MemberFlights,
  first: number,
  end: number,
  out: Float64Array,
): void {
  for (let member = first; member < end; member++) flights.fly(member, out, member * MEMBER_VALUES)
}

/** Flies and sums up a whole dispersion here and now. @throws NotFlyable where the plan itself does not fly */
export function disperse(
  plan: FlightPlan,
  column: Column,
  spread: Spread,
  members: number,
  seed: number,
  regions: readonly Region[] = [],
): Dispersion {
  const rows = new Float64Array(members * MEMBER_VALUES)
  flyMembers(new MemberFlights(plan, column, spread, seed), 0, members, rows)
  return summarize(rows, spread, regions)
}

/** Sums up the flown members of a dispersion; at least one must have flown. */
export function summarize(
  rows: Float64Array,
  spread: Spread,
  regions: readonly Region[],
): Dispersion {
  const members = rows.length / MEMBER_VALUES
  const plane = new LocalPlane(rows, members, MEMBER_VALUES)
  const offsets = new Float64Array(2 * members)
  let flown = 0
  for (let member = 0; member < members; member++) {
    const at = member * MEMBER_VALUES
    plane.project(rows[at + MEMBER.latitude], rows[at + MEMBER.longitude], offsets, 2 * member)
    if (!Number.isNaN(offsets[2 * member])) flown++
  }
  const points = flown === members ? offsets : offsets.filter((value) => !Number.isNaN(value))
  const cloud = new Cloud(points)
  const places = landingPlaces(rows, flown)
  const strewn = cloud.major > 1 && flown >= 20
  return {
    members,
    notFlown: members - flown,
    burstAltitude: quantilesOf(rows, MEMBER.burstAltitude, flown),
    landing: {
      mean: plane.origin,
      elapsed: quantilesOf(rows, MEMBER.elapsed, flown),
      ellipses: cloud.ellipses(SHARES),
      regions: strewn ? regionsOfShare(cloud, plane) : [],
      points: places,
    },
    inRegions: regions.map((region) => ({
      name: region.name,
      share: shareInside(region, places),
    })),
    causes: causesOf(rows, offsets, spread),
    standardError: standardError(offsets),
  }
}

function landingPlaces(rows: Float64Array, flown: number): Float64Array {
  const places = new Float64Array(2 * flown)
  let place = 0
  for (let at = 0; at < rows.length; at += MEMBER_VALUES) {
    if (Number.isNaN(rows[at + MEMBER.latitude])) continue
    places[place++] = rows[at + MEMBER.latitude]
    places[place++] = wrapLongitude(rows[at + MEMBER.longitude])
  }
  return places
}

function quantilesOf(rows: Float64Array, value: number, flown: number): Quantiles {
  const values = new Float64Array(flown)
  let next = 0
  for (let at = value; at < rows.length; at += MEMBER_VALUES) {
    if (!Number.isNaN(rows[at])) values[next++] = rows[at]
  }
  values.sort()
  return {
    p05: quantile(values, 0.05),
    p50: quantile(values, 0.5),
    p95: quantile(values, 0.95),
  }
}

function regionsOfShare(cloud: Cloud, plane: LocalPlane): RegionOfShare[] {
  const { longitude } = plane.origin
  return densestRegions(cloud, SHARES).map(({ share, area, polygons }) => ({
    name: null,
    share,
    area,
    polygons: polygons.map((rings) =>
      rings.map((ring) =>
        ring.map(([east, north]): [number, number] => {
          const place = plane.unproject(east, north)
          // A ring runs on across the antimeridian: its longitudes stay near the mean's.
          return [longitude + wrapLongitude(place.longitude - longitude), place.latitude]
        }),
      ),
    ),
  }))
}

function shareInside(region: Region, places: Float64Array): number {
  let inside = 0
  for (let i = 0; i < places.length; i += 2) {
    if (isInside(region, places[i], places[i + 1])) inside++
  }
  return inside / (places.length / 2)
}

/** Each replicate's mean is an independent estimate of the mean (Owen, SIAM J. Numer. Anal. 34, 1997, p. 1884). */
function standardError(offsets: Float64Array): number {
  const sums = new Float64Array(2 * REPLICATES)
  const counts = new Float64Array(REPLICATES)
  for (let member = 0; member < offsets.length / 2; member++) {
    if (Number.isNaN(offsets[2 * member])) continue
    const replicate = member % REPLICATES
    sums[2 * replicate] += offsets[2 * member]
    sums[2 * replicate + 1] += offsets[2 * member + 1]
    counts[replicate]++
  }
  const used = counts.filter((count) => count > 0).length
  if (used < 2) return NaN
  let squares = 0
  for (let side = 0; side < 2; side++) {
    const means = Array.from(counts, (count, i) => sums[2 * i + side] / count).filter(
      Number.isFinite,
    )
    const mean = means.reduce((total, value) => total + value, 0) / used
    squares += means.reduce((total, value) => total + (value - mean) ** 2, 0) / (used - 1) / used
  }
  return Math.sqrt(squares)
}
