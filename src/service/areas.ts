import { cutAtAntimeridian } from '../planning/antimeridian.ts'
import { type Region } from '../planning/regions.ts'
import { type Areas } from './schemas/regions.ts'
import { DEGREE, degrees, round } from './units.ts'

type Geometry = Extract<Areas, { type: 'Polygon' | 'MultiPolygon' }>

/** GeoJSON areas as regions in radians, one for each feature. */
export function toRegions(areas: Areas | undefined): Region[] {
  if (!areas) return []
  switch (areas.type) {
    case 'FeatureCollection':
      return areas.features.flatMap(toRegions)
    case 'Feature':
      return [{ name: areas.properties?.name ?? null, polygons: polygonsOf(areas.geometry) }]
    default:
      return [{ name: null, polygons: polygonsOf(areas) }]
  }
}

function polygonsOf(geometry: Geometry): Region['polygons'] {
  const polygons = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates
  return polygons.map((rings) =>
    rings.map((ring) =>
      ring.map(([longitude, latitude]): [number, number] => [
        longitude * DEGREE,
        latitude * DEGREE,
      ]),
    ),
  )
}

/** A region as a GeoJSON feature. */
export function areaFeature(region: Region, properties: Record<string, unknown>) {
  return {
    type: 'Feature' as const,
    properties,
    geometry: {
      type: 'MultiPolygon' as const,
      coordinates: cutAtAntimeridian(region.polygons).map((rings) =>
        rings.map((ring) =>
          ring.map(([longitude, latitude]) => [
            round(degrees(longitude), 5),
            round(degrees(latitude), 5),
          ]),
        ),
      ),
    },
  }
}
