import type { GeoJSONSourceSpecification, StyleSpecification } from 'maplibre-gl'
import { ink } from '../pictures/ink.ts'
import { shapeLayers } from './shapeLayers.ts'

const nothing: GeoJSONSourceSpecification = {
  type: 'geojson',
  data: { type: 'FeatureCollection', features: [] },
}

/** The map's sources and layers in the colours of the scheme that is on now. */
export function mapStyle(within: Element): StyleSpecification {
  const colour = (token: string) => ink(token, within)
  const round = { 'line-cap': 'round', 'line-join': 'round' } as const
  return {
    version: 8,
    sources: {
      land: { ...nothing, attribution: 'Coasts and borders: Natural Earth' },
      borders: nothing,
      graticule: nothing,
      tracks: nothing,
      areas: nothing,
      regions: nothing,
      'landing-points': nothing,
      drawn: nothing,
    },
    layers: [
      { id: 'water', type: 'background', paint: { 'background-color': colour('--map-water') } },
      { id: 'land', type: 'fill', source: 'land', paint: { 'fill-color': colour('--map-land') } },
      {
        id: 'coast',
        type: 'line',
        source: 'land',
        paint: { 'line-color': colour('--map-coast'), 'line-width': 1 },
      },
      {
        id: 'borders',
        type: 'line',
        source: 'borders',
        paint: {
          'line-color': colour('--map-border'),
          'line-width': 1.2,
          'line-dasharray': [1.5, 2],
        },
      },
      {
        id: 'graticule',
        type: 'line',
        source: 'graticule',
        paint: { 'line-color': colour('--map-graticule'), 'line-width': 0.7 },
      },
      ...shapeLayers(colour),
      {
        id: 'track-edge',
        type: 'line',
        source: 'tracks',
        layout: round,
        paint: {
          'line-color': colour('--sheet'),
          'line-width': ['case', ['get', 'first'], 7, 4],
          'line-opacity': 0.8,
        },
      },
      {
        id: 'ascent',
        type: 'line',
        source: 'tracks',
        filter: ['==', ['get', 'phase'], 'ascent'],
        layout: { ...round, 'line-sort-key': ['case', ['get', 'first'], 1, 0] },
        paint: {
          'line-color': ['get', 'colour'],
          'line-width': ['case', ['get', 'first'], 3.5, 2],
        },
      },
      {
        id: 'descent',
        type: 'line',
        source: 'tracks',
        filter: ['==', ['get', 'phase'], 'descent'],
        layout: { 'line-sort-key': ['case', ['get', 'first'], 1, 0] },
        paint: {
          'line-color': ['get', 'colour'],
          'line-width': ['case', ['get', 'first'], 3.5, 2],
          'line-dasharray': [2, 1.3],
        },
      },
    ],
  }
}
