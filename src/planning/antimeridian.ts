import { type Region } from './regions.ts'

type Polygon = Region['polygons'][number]
type Ring = Polygon[number]

const TURN = 2 * Math.PI

/**
 * Polygons of longitudes and latitudes in radians, cut where they cross the antimeridian so that no edge
 * runs round the globe (RFC 7946, section 3.1.9). An outer ring round a pole is closed over the pole.
 */
export function cutAtAntimeridian(polygons: readonly Polygon[]): Polygon[] {
  return polygons.flatMap((rings) => {
    const [first] = rings[0]
    const unwound = rings.map((ring) => unwind(ring, first[0]))
    return [-TURN, 0, TURN].flatMap((shift): Polygon[] => {
      const parts = unwound.map((ring) => sheet(ring, shift)).filter((ring) => ring.length > 3)
      return parts.length > 0 ? [parts] : []
    })
  })
}

/** The same ring with longitudes that run on instead of jumping, near `longitude`; closed over its pole. */
function unwind(ring: Ring, longitude: number): Ring {
  let last = longitude
  const unwound = ring.map(([east, north]): [number, number] => {
    last = east - TURN * Math.round((east - last) / TURN)
    return [last, north]
  })
  const [start] = unwound
  if (Math.abs(last - start[0]) < 1) return unwound
  const pole = (Math.sign(start[1]) * Math.PI) / 2
  return [...unwound, [last, pole], [start[0], pole], start]
}

/** What of a ring, moved by `shift`, lies between the two sides of the antimeridian; empty for nothing. */
function sheet(ring: Ring, shift: number): Ring {
  const moved = ring.map(([east, north]): [number, number] => [east + shift, north])
  return clip(
    clip(moved, (east) => east + Math.PI, -Math.PI),
    (east) => Math.PI - east,
    Math.PI,
  )
}

/** Sutherland and Hodgman, Comm. ACM 17, 1974, p. 32: the part of a closed ring where `inside` ≥ 0. */
function clip(ring: Ring, inside: (east: number) => number, side: number): Ring {
  if (ring.every(([east]) => inside(east) >= 0)) return ring
  const kept: Ring = []
  for (let index = 1; index < ring.length; index++) {
    const [[fromEast, fromNorth], [toEast, toNorth]] = [ring[index - 1], ring[index]]
    const [from, to] = [inside(fromEast), inside(toEast)]
    if (from >= 0 !== to >= 0) {
      kept.push([side, fromNorth + ((toNorth - fromNorth) * from) / (from - to)])
    }
    if (to >= 0) kept.push([toEast, toNorth])
  }
  return kept.length > 0 ? [...kept, kept[0]] : kept
}
