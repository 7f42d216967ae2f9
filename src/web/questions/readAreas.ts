import type { Feature, GeoJSON, Geometry, MultiPolygon, Polygon } from 'geojson'

/** An area as it was found in a file. */
export interface FoundArea {
  /** Empty where it has none */
  name: string
  polygon: Polygon | MultiPolygon
}

/** A text that holds no areas, with the reason in words. */
export class NoAreas extends Error {}

/** The polygons of a GeoJSON text (RFC 7946); other shapes in it are passed over. @throws NoAreas */
export function readAreas(text: string): FoundArea[] {
  const found = areasOf(parsed(text))
  if (found.length === 0) throw new NoAreas('There is no polygon in it.')
  for (const { name, polygon } of found) check(polygon, name)
  return found
}

function parsed(text: string): GeoJSON {
  let value: unknown
  try {
    value = JSON.parse(text)
  } catch {
    throw new NoAreas('This is no JSON: GeoJSON is wanted.')
  }
  if (typeof value !== 'object' || value === null || !('type' in value)) {
    throw new NoAreas('This is no GeoJSON: it says no type.')
  }
  return value as GeoJSON
}

function areasOf(shape: GeoJSON | null): FoundArea[] {
  switch (shape?.type) {
    case 'FeatureCollection':
      return Array.isArray(shape.features) ? shape.features.flatMap(areasOf) : []
    case 'Feature':
      return areasOf(shape.geometry as Geometry | null).map(({ polygon }) => ({
        name: nameOf(shape),
        polygon,
      }))
    case 'GeometryCollection':
      return Array.isArray(shape.geometries) ? shape.geometries.flatMap(areasOf) : []
    case 'Polygon':
    case 'MultiPolygon':
      return [
        { name: '', polygon: { type: shape.type, coordinates: shape.coordinates } as Polygon },
      ]
    default:
      return []
  }
}

function nameOf({ properties }: Feature): string {
  const name: unknown = (properties as Record<string, unknown> | null | undefined)?.name
  return typeof name === 'string' ? name.slice(0, 200) : ''
}

/** @throws NoAreas where a ring is none (RFC 7946, 3.1.6) or leaves the earth */
function check(polygon: Polygon | MultiPolygon, name: string): void {
  const what = name === '' ? 'A polygon' : `“${name}”`
  const polygons: unknown = polygon.type === 'Polygon' ? [polygon.coordinates] : polygon.coordinates
  const whole = (list: unknown): list is unknown[] => Array.isArray(list) && list.length > 0
  if (!whole(polygons)) throw new NoAreas(`${what} has no corners.`)
  for (const rings of polygons) {
    if (!whole(rings)) throw new NoAreas(`${what} has no corners.`)
    for (const ring of rings) {
      if (!whole(ring) || ring.length < 4) {
        throw new NoAreas(`${what} has a ring of fewer than four positions.`)
      }
      if (!ring.every(isPosition)) {
        throw new NoAreas(
          `${what} has a corner that is no longitude and latitude in degrees (in this order).`,
        )
      }
      const [first, last] = [ring[0], ring.at(-1)] as [number[], number[]]
      if (first[0] !== last[0] || first[1] !== last[1]) {
        throw new NoAreas(`${what} has a ring that does not end where it begins.`)
      }
    }
  }
}

function isPosition(position: unknown): boolean {
  if (!Array.isArray(position)) return false
  const [longitude, latitude] = position as unknown[]
  return (
    typeof longitude === 'number' &&
    typeof latitude === 'number' &&
    Math.abs(longitude) <= 540 &&
    Math.abs(latitude) <= 90
  )
}
