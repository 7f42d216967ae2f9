import { type TrackRow } from './trackRow.ts'

/** A track with what a file of it says about itself. */
export interface TrackFile {
  title: string
  runId: string
  /** Plain sentences, the standing line on airspace first */
  cautions: readonly string[]
  rows: readonly TrackRow[]
}

/** What the file says it is: a prediction, and what weakens it. */
export function describeTrack(file: TrackFile): string {
  return ['Predicted, not observed.', ...file.cautions].join('\n')
}

/** The named points of a track: release, burst, landing. */
export function namedPoints({ rows }: TrackFile): { name: string; row: TrackRow }[] {
  const named: { name: string; row: TrackRow }[] = []
  const release = rows.at(0)
  const burst = rows.find((row) => row.phase === 'burst')
  const landing = rows.at(-1)
  if (release) named.push({ name: 'Release', row: release })
  if (burst) named.push({ name: 'Burst', row: burst })
  if (landing) named.push({ name: 'Landing', row: landing })
  return named
}

/** The two parts of a track, which share the burst. */
export function legs({ rows }: TrackFile): { name: string; rows: readonly TrackRow[] }[] {
  const burst = rows.findIndex((row) => row.phase === 'burst')
  return [
    { name: 'Ascent', rows: rows.slice(0, burst + 1) },
    { name: 'Descent', rows: rows.slice(burst) },
  ]
}

/** Longitude, latitude (degrees) and altitude (m): the order of GeoJSON and KML. */
export type Coordinate = [number, number, number]

/**
 * The line through rows, cut where it crosses the antimeridian so that no part runs round the globe
 * (RFC 7946, section 3.1.9). Both sides of a cut end on the meridian itself.
 */
export function lines(rows: readonly TrackRow[]): Coordinate[][] {
  const parts: Coordinate[][] = [[]]
  let previous: TrackRow | undefined
  for (const row of rows) {
    if (previous && Math.abs(row.longitudeDeg - previous.longitudeDeg) > 180) {
      const side = previous.longitudeDeg < 0 ? -180 : 180
      const ahead = row.longitudeDeg + 2 * side
      const share =
        ahead === previous.longitudeDeg
          ? 0
          : (side - previous.longitudeDeg) / (ahead - previous.longitudeDeg)
      const latitude = previous.latitudeDeg + (row.latitudeDeg - previous.latitudeDeg) * share
      const altitude = previous.altitudeM + (row.altitudeM - previous.altitudeM) * share
      parts.at(-1)?.push([side, latitude, altitude])
      parts.push([[-side, latitude, altitude]])
    }
    parts.at(-1)?.push([row.longitudeDeg, row.latitudeDeg, row.altitudeM])
    previous = row
  }
  return parts.filter((part) => part.length > 1)
}
