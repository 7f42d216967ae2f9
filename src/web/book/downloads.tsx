import { Link } from 'wouter-preact'

const FORMATS = [
  ['geojson', 'GeoJSON'],
  ['kml', 'KML'],
  ['gpx', 'GPX'],
  ['csv', 'CSV'],
] as const

/** The track of a run as a file, and the sheet for the authority and the crew. */
export function Downloads({ runId }: { runId: string }) {
  return (
    <p class="row">
      <Link class="button" href={`/notice/${runId}`}>
        Notice sheet
      </Link>
      {FORMATS.map(([format, name]) => (
        <a key={format} class="button" href={`/v1/runs/${runId}/track?format=${format}`} download>
          {name}
        </a>
      ))}
    </p>
  )
}
