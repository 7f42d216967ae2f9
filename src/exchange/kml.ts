import { create } from 'xmlbuilder2'
import {
  describeTrack,
  legs,
  lines,
  namedPoints,
  type Coordinate,
  type TrackFile,
} from './trackFile.ts'
import { XML } from './xml.ts'

/** A track as KML 2.2 (OGC 07-147r2): ascent and descent as lines, and the named points with times. */
export function trackKml(file: TrackFile): string {
  const root = create(XML).ele('http://www.opengis.net/kml/2.2', 'kml')
  const document = root.ele('Document')
  document.ele('name').txt(file.title)
  document.ele('description').txt(describeTrack(file))
  for (const { name, rows } of legs(file)) {
    const placemark = document.ele('Placemark')
    placemark.ele('name').txt(name)
    const span = placemark.ele('TimeSpan')
    span.ele('begin').txt(rows.at(0)?.time ?? '')
    span.ele('end').txt(rows.at(-1)?.time ?? '')
    const geometry = placemark.ele('MultiGeometry')
    for (const line of lines(rows)) {
      const string = geometry.ele('LineString')
      string.ele('altitudeMode').txt('absolute')
      string.ele('coordinates').txt(line.map(tuple).join(' '))
    }
  }
  for (const { name, row } of namedPoints(file)) {
    const placemark = document.ele('Placemark')
    placemark.ele('name').txt(name)
    placemark.ele('TimeStamp').ele('when').txt(row.time)
    const point = placemark.ele('Point')
    point.ele('altitudeMode').txt('absolute')
    point.ele('coordinates').txt(tuple([row.longitudeDeg, row.latitudeDeg, row.altitudeM]))
  }
  return root.end({ prettyPrint: true })
}

function tuple(coordinate: Coordinate): string {
  return coordinate.map((number) => number.toFixed(7)).join(',') // no exponents
}
