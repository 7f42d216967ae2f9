import type { Feature, FeatureCollection, MultiPolygon, Polygon, Position } from 'geojson'
import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'
import { type ShownArea } from '../pictures/shownArea.ts'
import { type MapFrame, type MapPlace, wrapped } from './frame.ts'

export const NOTHING: FeatureCollection<never> = { type: 'FeatureCollection', features: [] }

/** The smallest areas that hold shares of the landings, the smallest share first (rank 0). */
export function landingRegions(
  cloud: DispersionAnswer,
  frame: MapFrame,
): FeatureCollection<MultiPolygon> {
  const features = [...cloud.landing.regionsOfShare.features]
    .sort((one, other) => one.properties.share - other.properties.share)
    .map(({ properties, geometry }, rank): Feature<MultiPolygon> => ({
      type: 'Feature',
      properties: { rank, share: properties.share },
      geometry: onMap(geometry, frame),
    }))
  return { type: 'FeatureCollection', features }
}

/** Each member's landing place. */
export function landingPoints(cloud: DispersionAnswer, frame: MapFrame): Feature {
  return {
    type: 'Feature',
    properties: {},
    geometry: {
      type: 'MultiPoint',
      coordinates: cloud.landing.points.map(([longitude, latitude]) =>
        frame.toMap(latitude, longitude),
      ),
    },
  }
}

/** Areas to avoid and areas wanted. */
export function areaShapes(
  areas: readonly ShownArea[],
  frame: MapFrame,
): FeatureCollection<MultiPolygon> {
  return {
    type: 'FeatureCollection',
    features: areas.map(({ name, wanted, polygon }) => ({
      type: 'Feature',
      properties: { name, wanted },
      geometry: onMap(polygon, frame),
    })),
  }
}

/** The northernmost corner of a shape on the map: where its label stands. */
export function topOf({ coordinates }: MultiPolygon): MapPlace | null {
  let top: MapPlace | null = null
  for (const [x, y] of coordinates.flat(2)) if (!top || y > top[1]) top = [x, y]
  return top
}

/** A polygon on the map, each ring running on where the map's sheet ends. */
function onMap(shape: Polygon | MultiPolygon, frame: MapFrame): MultiPolygon {
  const polygons = shape.type === 'Polygon' ? [shape.coordinates] : shape.coordinates
  return {
    type: 'MultiPolygon',
    coordinates: polygons.map((rings) => rings.map((ring) => ringOnMap(ring, frame))),
  }
}

function ringOnMap(ring: readonly Position[], frame: MapFrame): MapPlace[] {
  let before: number | null = null
  return ring.map(([longitude, latitude]) => {
    const [x, y] = frame.toMap(latitude, longitude)
    const on: number = before === null ? x : before + wrapped(x - before)
    before = on
    return [on, y]
  })
}
