import { create } from 'xmlbuilder2'
import { describeTrack, namedPoints, type TrackFile } from './trackFile.ts'
import { type TrackRow } from './trackRow.ts'
import { XML } from './xml.ts'

/** A track as GPX 1.1: one track of one segment, burst and landing as waypoints. */
export function trackGpx(file: TrackFile): string {
  const root = create(XML).ele('http://www.topografix.com/GPX/1/1', 'gpx', {
    version: '1.1',
    creator: 'Driftbook',
  })
  const metadata = root.ele('metadata')
  metadata.ele('name').txt(file.title)
  metadata.ele('desc').txt(describeTrack(file))
  for (const { name, row } of namedPoints(file)) {
    addPoint(root, 'wpt', row).ele('name').txt(name)
  }
  const track = root.ele('trk')
  track.ele('name').txt(file.title)
  const segment = track.ele('trkseg')
  for (const row of file.rows) addPoint(segment, 'trkpt', row)
  return root.end({ prettyPrint: true })
}

function addPoint(parent: ReturnType<typeof create>, element: string, row: TrackRow) {
  const point = parent.ele(element, {
    lat: degrees(row.latitudeDeg),
    lon: degrees(row.longitudeDeg),
  })
  point.ele('ele').txt(String(row.altitudeM))
  point.ele('time').txt(row.time)
  return point
}

/** xsd:decimal has no exponent, which a small number's plain string would. */
function degrees(value: number): string {
  return value.toFixed(7)
}
