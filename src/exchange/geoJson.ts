import { describeTrack, legs, lines, namedPoints, type TrackFile } from './trackFile.ts'

/** A track as a GeoJSON feature collection (RFC 7946): ascent, descent, and the named points. */
export function trackGeoJson(file: TrackFile): string {
  const { runId } = file
  const paths = legs(file).map(({ name, rows }) => {
    const parts = lines(rows)
    const [first] = parts
    return {
      type: 'Feature',
      properties: { name, runId, times: rows.map((row) => row.time) },
      geometry:
        parts.length === 1
          ? { type: 'LineString', coordinates: first }
          : { type: 'MultiLineString', coordinates: parts },
    }
  })
  const points = namedPoints(file).map(({ name, row }) => ({
    type: 'Feature',
    properties: { name, runId, time: row.time, elapsedS: row.elapsedS },
    geometry: { type: 'Point', coordinates: [row.longitudeDeg, row.latitudeDeg, row.altitudeM] },
  }))
  return JSON.stringify({
    type: 'FeatureCollection',
    title: file.title,
    description: describeTrack(file),
    features: [...paths, ...points],
  })
}
