import type { FeatureCollection, LineString } from 'geojson'
import { ink, runToken } from '../pictures/ink.ts'
import { burstIndex } from '../pictures/moment.ts'
import { type ShownRun, type TrackRow } from '../pictures/shownRun.ts'
import { type MapFrame, type MapPlace, wrapped } from './frame.ts'

/** The ground tracks of runs as two lines each, their ascent and their descent. */
export function trackLines(
  runs: readonly ShownRun[],
  frame: MapFrame,
  within: Element,
): FeatureCollection<LineString> {
  const features = runs.flatMap(({ track }, index) => {
    const burst = burstIndex(track)
    const places = trackPlaces(track, frame)
    return (['ascent', 'descent'] as const).map((phase) => ({
      type: 'Feature' as const,
      properties: { phase, first: index === 0, colour: ink(runToken(index, phase), within) },
      geometry: {
        type: 'LineString' as const,
        coordinates: phase === 'ascent' ? places.slice(0, burst + 1) : places.slice(burst),
      },
    }))
  })
  return { type: 'FeatureCollection', features }
}

/** The places of a track on the map, running on where the map's sheet ends. */
export function trackPlaces(track: readonly TrackRow[], frame: MapFrame): MapPlace[] {
  let before: number | null = null
  return track.map(({ latitudeDeg, longitudeDeg }) => {
    const [x, y] = frame.toMap(latitudeDeg, longitudeDeg)
    const on: number = before === null ? x : before + wrapped(x - before)
    before = on
    return [on, y]
  })
}
