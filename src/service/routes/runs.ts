import { z } from 'zod'
import { unpackTrack } from '../../exchange/trackRow.ts'
import { type App, type Context } from '../context.ts'
import { answerCreation } from '../creating.ts'
import { storedPlan, storedRun } from '../flightAnswer.ts'
import { flyRun } from '../flying.ts'
import { keepRun } from '../keeping.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { notFound } from '../problems.ts'
import {
  creatingHeaders,
  idParams,
  pageQuery,
  pageSchema,
  problemAnswers,
} from '../schemas/common.ts'
import { airSchema } from '../schemas/plan.ts'
import { runSchema, trackSchema } from '../schemas/run.ts'
import { chooseTrackFormat, trackFormatQuery, trackFormats } from '../trackFormats.ts'
import { seconds } from '../units.ts'

const tags = ['Runs']

/** Stored predictions of a flight. */
export function runRoutes(app: App, { store, airs }: Context): void {
  app.post(
    '/v1/flights/:id/runs',
    {
      schema: {
        tags,
        summary: 'Fly a stored plan in other air',
        params: idParams,
        headers: creatingHeaders,
        body: z.strictObject({ air: airSchema }),
        response: { 201: runSchema, ...problemAnswers },
      },
    },
    (request, reply) =>
      answerCreation(request, reply, store, () => {
        const { id } = request.params
        const flight = store.flights.get(id)
        if (!flight) throw notFound('flight', id)
        const plan = { ...storedPlan(flight), air: request.body.air }
        const made = flyRun(id, plan, storedRun(flight.latestAnswer), airs)
        return {
          location: `/v1/runs/${made.run.id}`,
          answer: made.run,
          store: () => {
            keepRun(store, made)
          },
        }
      }),
  )

  app.get(
    '/v1/flights/:id/runs',
    {
      schema: {
        tags,
        summary: 'List the runs of a flight, newest first',
        params: idParams,
        querystring: pageQuery,
        response: { 200: pageSchema(runSchema), ...problemAnswers },
      },
    },
    (request) => {
      const { id } = request.params
      if (!store.flights.get(id)) throw notFound('flight', id)
      return pageAnswer(store.runs.list(id, pageRequest(request.query)), (row) =>
        storedRun(row.answer),
      )
    },
  )

  app.get(
    '/v1/runs/:id',
    {
      schema: {
        tags,
        summary: 'One run, as it was answered',
        params: idParams,
        response: { 200: runSchema, ...problemAnswers },
      },
    },
    (request, reply) => {
      const { id } = request.params
      const answer = store.runs.answer(id)
      if (answer === undefined) throw notFound('run', id)
      reply.type('application/json; charset=utf-8')
      return reply.send(answer)
    },
  )

  app.get(
    '/v1/runs/:id/track',
    {
      schema: {
        tags,
        summary: 'The track of a run',
        description:
          'JSON, CSV, GeoJSON, KML or GPX, by `?format=` or the Accept header. A stored track never changes.',
        params: idParams,
        querystring: trackFormatQuery,
        response: {
          200: {
            description: 'The track',
            content: {
              'application/json': { schema: trackSchema },
              'text/csv': { schema: z.string() },
              'application/geo+json': { schema: z.string() },
              'application/vnd.google-earth.kml+xml': { schema: z.string() },
              'application/gpx+xml': { schema: z.string() },
            },
          },
          ...problemAnswers,
        },
      },
    },
    (request, reply) => {
      const { id } = request.params
      const stored = store.runs.withTrack(id)
      if (!stored) throw notFound('run', id)
      const format = trackFormats[chooseTrackFormat(request)]
      const run = storedRun(stored.answer)
      const title = store.flights.get(run.flightId)?.title ?? 'Flight'
      const rows = unpackTrack(stored.track, seconds(run.plan.launch.time))
      reply.header('vary', 'accept')
      if (format.extension !== 'json') {
        reply.header('content-disposition', `attachment; filename="${id}.${format.extension}"`)
      }
      reply.type(format.type)
      return reply.send(format.write(run, title, rows))
    },
  )
}
