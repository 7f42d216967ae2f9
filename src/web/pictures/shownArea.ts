import type { MultiPolygon, Polygon } from 'geojson'

/** A place to avoid or one that is wanted, to be drawn on the map. */
export interface ShownArea {
  name: string
  wanted: boolean
  polygon: Polygon | MultiPolygon
}
