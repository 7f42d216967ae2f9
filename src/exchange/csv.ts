import { stringify } from 'csv-stringify/sync'
import { type TrackFile } from './trackFile.ts'

/** A track as comma-separated values with a header line (RFC 4180). */
export function trackCsv(file: TrackFile): string {
  return stringify([...file.rows], {
    header: true,
    record_delimiter: 'windows',
    columns: [
      'elapsedS',
      'time',
      'latitudeDeg',
      'longitudeDeg',
      'altitudeM',
      'verticalSpeedMs',
      'windFromDeg',
      'windSpeedMs',
      'phase',
    ],
  })
}
