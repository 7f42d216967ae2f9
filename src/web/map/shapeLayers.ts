import type { LayerSpecification } from 'maplibre-gl'

/** Dashes of the regions of share, the smallest share first; shares differ by dash and by label. */
const DASHES = [undefined, [4, 2], [1, 1.6]]

/** Layers of landing regions, landing points, areas and the area being drawn. */
export function shapeLayers(colour: (token: string) => string): LayerSpecification[] {
  return [
    {
      id: 'areas-fill',
      type: 'fill',
      source: 'areas',
      paint: {
        'fill-color': ['case', ['get', 'wanted'], colour('--wind'), colour('--fault')],
        'fill-opacity': 0.12,
      },
    },
    {
      id: 'areas-wanted',
      type: 'line',
      source: 'areas',
      filter: ['get', 'wanted'],
      paint: { 'line-color': colour('--wind'), 'line-width': 2 },
    },
    {
      id: 'areas-avoided',
      type: 'line',
      source: 'areas',
      filter: ['!', ['get', 'wanted']],
      paint: { 'line-color': colour('--fault'), 'line-width': 2.5, 'line-dasharray': [1, 1] },
    },
    {
      id: 'landing-points',
      type: 'circle',
      source: 'landing-points',
      paint: {
        'circle-radius': 1.6,
        'circle-color': colour('--descent'),
        'circle-opacity': 0.4,
      },
    },
    {
      id: 'regions-fill',
      type: 'fill',
      source: 'regions',
      paint: { 'fill-color': colour('--descent'), 'fill-opacity': 0.1 },
    },
    ...DASHES.map((dash, rank): LayerSpecification => ({
      id: `region-${rank}`,
      type: 'line',
      source: 'regions',
      filter: ['==', ['get', 'rank'], rank],
      paint: {
        'line-color': colour('--descent'),
        'line-width': 2,
        ...(dash ? { 'line-dasharray': dash } : {}),
      },
    })),
    {
      id: 'drawn',
      type: 'line',
      source: 'drawn',
      paint: { 'line-color': colour('--accent'), 'line-width': 2.5, 'line-dasharray': [2, 1] },
    },
    {
      id: 'drawn-corners',
      type: 'circle',
      source: 'drawn',
      paint: {
        'circle-radius': 5,
        'circle-color': colour('--sheet'),
        'circle-stroke-color': colour('--accent'),
        'circle-stroke-width': 2.5,
      },
    },
  ]
}
