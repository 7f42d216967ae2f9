import { type FastifyRequest } from 'fastify'
import { z } from 'zod'
import { trackCsv } from '../exchange/csv.ts'
import { trackGeoJson } from '../exchange/geoJson.ts'
import { trackGpx } from '../exchange/gpx.ts'
import { trackKml } from '../exchange/kml.ts'
import { type TrackFile } from '../exchange/trackFile.ts'
import { type TrackRow } from '../exchange/trackRow.ts'
import { Problem } from './problems.ts'
import { type Run } from './schemas/run.ts'

interface TrackFormat {
  /** Media type of the answer */
  type: string
  extension: string
  write: (run: Run, title: string, rows: TrackRow[]) => string
}

/** The forms that a track is answered in. */
export const trackFormats = {
  json: {
    type: 'application/json; charset=utf-8',
    extension: 'json',
    write: ({ id, cautions }, _title, points) => JSON.stringify({ runId: id, cautions, points }),
  },
  csv: file('text/csv; charset=utf-8; header=present', 'csv', trackCsv),
  geojson: file('application/geo+json', 'geojson', trackGeoJson),
  kml: file('application/vnd.google-earth.kml+xml', 'kml', trackKml),
  gpx: file('application/gpx+xml', 'gpx', trackGpx),
} satisfies Record<string, TrackFormat>

type TrackFormatName = keyof typeof trackFormats

const names = Object.keys(trackFormats) as [TrackFormatName, ...TrackFormatName[]]

export const trackFormatQuery = z.strictObject({
  format: z.enum(names).optional().describe('Wins over the Accept header'),
})

/**
 * The format that a request asks for: `?format=`, else the best match of its Accept header.
 * @throws Problem 406 where it accepts none
 */
export function chooseTrackFormat(
  request: FastifyRequest<{ Querystring: z.output<typeof trackFormatQuery> }>,
): TrackFormatName {
  if (request.query.format) return request.query.format
  const types = names.map((name) => mediaType(name))
  const accepted = request.accepts().type(types)
  const chosen = names.find((name) => mediaType(name) === accepted)
  if (!chosen) throw new Problem(406, `A track is answered as ${types.join(', ')}.`)
  return chosen
}

function mediaType(name: TrackFormatName): string {
  return trackFormats[name].type.split(';')[0]
}

function file(type: string, extension: string, write: (file: TrackFile) => string): TrackFormat {
  return {
    type,
    extension,
    write: (run, title, rows) =>
      write({
        title,
        runId: run.id,
        cautions: run.cautions.map((caution) => caution.message),
        rows,
      }),
  }
}
