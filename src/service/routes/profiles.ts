import { setImmediate } from 'node:timers/promises'
import { v7 as uuid } from 'uuid'
import { z } from 'zod'
import { type SoundingLevel } from '../../physics/sounding.ts'
import { profileSchema } from '../../soundings/json.ts'
import { levelsAnswer, summary } from '../../soundings/levelsAnswer.ts'
import { observedAscent, type ObservedAscent } from '../../soundings/observedAscent.ts'
import { type Sounding } from '../../soundings/profile.ts'
import { readSoundings, type ReadOptions } from '../../soundings/readSoundings.ts'
import { type ProfileRow } from '../../store/profiles.ts'
import { type App, type Context } from '../context.ts'
import { answerCreation } from '../creating.ts'
import { now } from '../flying.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { notFound, Problem } from '../problems.ts'
import {
  creatingHeaders,
  idParams,
  pageQuery,
  pageSchema,
  problemAnswers,
  timeSchema,
} from '../schemas/common.ts'
import {
  levelAnswerSchema,
  profileAnswerSchema,
  uploadQuery,
  type ProfileAnswer,
} from '../schemas/profile.ts'
import { degrees, isoTime, round, seconds } from '../units.ts'

/** Largest upload, bytes. */
const UPLOAD_LIMIT = 20_000_000

const UPLOAD_TYPES = [
  'application/json',
  'text/csv',
  'text/plain',
  'application/bufr',
  'application/octet-stream',
]

/** More bytes than this are read by a thread, so that others are answered meanwhile. */
const MOST_READ_HERE = 200_000

/** Soundings made ready for the store before other requests get a turn. */
const ROWS_A_TURN = 10

const tags = ['Soundings']

/** Uploaded soundings. They take other bodies than the rest, so register them in a scope of their own. */
export function profileRoutes(app: App, { store, airs, watcher, pool }: Context): void {
  app.removeAllContentTypeParsers()
  app.addContentTypeParser(
    UPLOAD_TYPES,
    { parseAs: 'buffer', bodyLimit: UPLOAD_LIMIT },
    (_request, body, done) => {
      done(null, body)
    },
  )

  app.post(
    '/v1/profiles',
    {
      schema: {
        tags,
        summary: 'Upload soundings',
        description:
          'JSON, CSV, IGRA v2 text, TEMP text (FM 35) or BUFR (FM 94); the content decides unless `?format=` does.',
        headers: creatingHeaders,
        querystring: uploadQuery,
        body: {
          content: {
            'application/json': { schema: profileSchema },
            'text/csv': { schema: z.string() },
            'text/plain': { schema: z.string() },
            'application/bufr': { schema: z.string() },
            'application/octet-stream': { schema: z.string() },
          },
        },
        response: {
          201: z.object({ profiles: z.array(profileAnswerSchema) }),
          ...problemAnswers,
        },
      },
    },
    (request, reply) =>
      answerCreation(request, reply, store, async () => {
        const { name, validAt, format } = request.query
        const bytes = request.body
        if (!Buffer.isBuffer(bytes)) throw new Problem(400, 'The body is empty: send a sounding.')
        const options: ReadOptions = {
          receivedAt: Date.now() / 1000,
          ...(name === undefined ? {} : { name }),
          ...(validAt === undefined ? {} : { validAt: seconds(validAt) }),
          ...(format === undefined ? {} : { format }),
        }
        const soundings =
          bytes.length > MOST_READ_HERE
            ? await pool.read(bytes, options)
            : readSoundings(bytes, options)
        const rows: ProfileRow[] = []
        for (const sounding of soundings) {
          rows.push(profileRow(sounding))
          if (rows.length % ROWS_A_TURN === 0) await setImmediate()
        }
        const [first] = rows
        return {
          location: rows.length === 1 ? `/v1/profiles/${first.id}` : null,
          answer: { profiles: rows.map(storedProfile) },
          store: () => {
            for (const row of rows) {
              store.profiles.insert(row)
              watcher.arrived(row)
            }
          },
        }
      }),
  )

  app.get(
    '/v1/profiles',
    {
      schema: {
        tags,
        summary: 'List soundings, newest first',
        querystring: pageQuery.extend({
          validFrom: timeSchema.optional().describe('Valid at this time or later'),
          validTo: timeSchema.optional().describe('Valid before this time'),
        }),
        response: { 200: pageSchema(profileAnswerSchema), ...problemAnswers },
      },
    },
    (request) => {
      const { validFrom, validTo } = request.query
      const filter = {
        validFrom: validFrom === undefined ? null : seconds(validFrom),
        validTo: validTo === undefined ? null : seconds(validTo),
      }
      return pageAnswer(store.profiles.list(filter, pageRequest(request.query)), storedProfile)
    },
  )

  app.get(
    '/v1/profiles/:id',
    {
      schema: {
        tags,
        summary: 'One sounding',
        params: idParams,
        response: { 200: profileAnswerSchema, ...problemAnswers },
      },
    },
    (request) => storedProfile(profileOr404(request.params.id)),
  )

  app.get(
    '/v1/profiles/:id/levels',
    {
      schema: {
        tags,
        summary: 'The completed levels of a sounding, lowest first',
        params: idParams,
        response: { 200: z.object({ levels: z.array(levelAnswerSchema) }), ...problemAnswers },
      },
    },
    (request) => {
      const { levels } = profileOr404(request.params.id)
      return { levels: levelsAnswer(JSON.parse(levels) as SoundingLevel[]) }
    },
  )

  app.delete(
    '/v1/profiles/:id',
    {
      schema: {
        tags,
        summary: 'Delete a sounding that no run or flight uses',
        params: idParams,
        response: { 204: z.undefined().describe('Deleted'), ...problemAnswers },
      },
    },
    (request, reply) => {
      const { id } = request.params
      const { runs, flights } = store.profiles.uses(id)
      if (runs + flights > 0) {
        throw new Problem(
          409,
          `${runs} runs were flown in this sounding and ${flights} flights are planned in it: it is kept with them.`,
        )
      }
      if (!store.profiles.remove(id)) throw notFound('sounding', id)
      airs.forget(id)
      reply.status(204)
      return reply.send()
    },
  )

  function profileOr404(id: string): ProfileRow {
    const row = store.profiles.get(id)
    if (!row) throw notFound('sounding', id)
    return row
  }
}

/** A sounding as it is stored, with an id of its own. */
export function profileRow(sounding: Sounding): ProfileRow {
  const { name, validAt, latitude, longitude, levels, notes } = sounding
  const id = uuid()
  const createdAt = now()
  const answer: ProfileAnswer = {
    id,
    name,
    createdAt,
    validAt: validAt === null ? null : isoTime(validAt),
    latitudeDeg: latitude === null ? null : degrees(latitude),
    longitudeDeg: longitude === null ? null : degrees(longitude),
    ...summary(sounding),
    observedAscent: ascentAnswer(observedAscent(sounding)),
    notes,
  }
  return {
    id,
    name,
    validAt,
    latitude,
    longitude,
    createdAt,
    summary: JSON.stringify(answer),
    levels: JSON.stringify(levels),
  }
}

function ascentAnswer(ascent: ObservedAscent | null): ProfileAnswer['observedAscent'] {
  if (!ascent) return null
  const { durationS, lowestAltitudeM, highestAltitudeM, meanRateMs, drift } = ascent
  return {
    durationS,
    lowestAltitudeM: round(lowestAltitudeM, 1),
    highestAltitudeM: round(highestAltitudeM, 1),
    meanRateMs: round(meanRateMs, 3),
    drift: drift && {
      altitudeM: round(drift.altitudeM, 1),
      latitudeDeg: round(drift.latitudeDeg, 6),
      longitudeDeg: round(drift.longitudeDeg, 6),
      distanceM: round(drift.distanceM, 1),
      bearingDeg: round(drift.bearingDeg, 2),
    },
  }
}

function storedProfile(row: { summary: string }): ProfileAnswer {
  // Soundings stored by an older program say nothing of their ascent.
  const { observedAscent: ascent = null, ...answer } = JSON.parse(
    row.summary,
  ) as Partial<ProfileAnswer>
  return { ...answer, observedAscent: ascent } as ProfileAnswer
}
