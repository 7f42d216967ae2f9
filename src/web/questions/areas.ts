import type { FeatureCollection, MultiPolygon, Polygon } from 'geojson'
import { kept } from '../kept.ts'
import { type ShownArea } from '../pictures/shownArea.ts'

/** Places to avoid and places wanted; they survive a reload. */
export const areas = kept<ShownArea[]>('driftbook.areas.1', [], (value): value is ShownArea[] =>
  Array.isArray(value),
)

/** Adds a place to avoid, named by its number unless it has a name. */
export function addArea(polygon: Polygon | MultiPolygon, name = ''): void {
  const title = name.trim() || `Area ${areas.value.length + 1}`
  areas.value = [...areas.value, { name: title, wanted: false, polygon }]
}

/** Areas as a request carries them; undefined where there are none. */
export function areasRequest(
  chosen: readonly ShownArea[],
): FeatureCollection<Polygon | MultiPolygon> | undefined {
  if (chosen.length === 0) return undefined
  return {
    type: 'FeatureCollection',
    features: chosen.map(({ name, polygon }) => ({
      type: 'Feature',
      properties: { name },
      geometry: polygon,
    })),
  }
}
