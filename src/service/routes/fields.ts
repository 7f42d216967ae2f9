import { Readable } from 'node:stream'
import { v7 as uuid } from 'uuid'
import { z } from 'zod'
import { OutsideField } from '../../fields/outsideField.ts'
import { type FieldRow } from '../../store/fields.ts'
import { type App, type Context } from '../context.ts'
import { answerCreation } from '../creating.ts'
import { columnCsv, columnLevel, fieldAnswer } from '../fieldAnswer.ts'
import { now } from '../flying.ts'
import { outsideMessage } from '../outsideFieldAnswer.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { faultyRequest, notFound, Problem } from '../problems.ts'
import {
  creatingHeaders,
  idParams,
  pageQuery,
  pageSchema,
  problemAnswers,
} from '../schemas/common.ts'
import {
  columnQuery,
  columnSchema,
  fieldAnswerSchema,
  fieldUploadQuery,
  type FieldAnswer,
} from '../schemas/field.ts'
import { DEGREE, isoTime, seconds } from '../units.ts'

const UPLOAD_TYPES = ['application/octet-stream', 'application/grib']

const tags = ['Forecasts']

/** Uploaded forecasts. They take other bodies than the rest, so register them in a scope of their own. */
export function fieldRoutes(app: App, { store, airs, fieldFiles, watcher }: Context): void {
  app.removeAllContentTypeParsers()
  app.addContentTypeParser(UPLOAD_TYPES, (_request, payload, done) => {
    done(null, payload)
  })

  app.post(
    '/v1/fields',
    {
      schema: {
        tags,
        summary: 'Upload a forecast on a grid',
        description:
          'GRIB edition 2 (FM 92), up to 2 GiB, many messages a file: height, temperature, wind and humidity on pressure levels over one grid. The upload goes to the disk as it comes. Messages that are not read are named and skipped.',
        headers: creatingHeaders,
        querystring: fieldUploadQuery,
        body: {
          content: {
            'application/grib': { schema: z.string() },
            'application/octet-stream': { schema: z.string() },
          },
        },
        response: { 201: fieldAnswerSchema, ...problemAnswers },
      },
    },
    async (request, reply) => {
      const { body } = request as { body: unknown }
      if (!(body instanceof Readable)) throw new Problem(400, 'The body is empty: send a forecast.')
      const { name } = request.query
      const id = uuid()
      const digest = await fieldFiles.receive(id, body)
      try {
        await answerCreation(
          request,
          reply,
          store,
          async () => {
            const answer = await fieldFiles.decode(id, (field) =>
              fieldAnswer(field, id, name, now()),
            )
            return {
              location: `/v1/fields/${id}`,
              answer,
              store: () => {
                store.fields.insert(fieldRow(answer))
                watcher.fieldArrived(answer)
              },
              stored: async () => {
                await fieldFiles.keep(id)
                watcher.wake()
              },
            }
          },
          digest,
        )
      } finally {
        await fieldFiles.discard(id)
      }
      return reply
    },
  )

  app.get(
    '/v1/fields',
    {
      schema: {
        tags,
        summary: 'List forecasts, newest first',
        querystring: pageQuery,
        response: { 200: pageSchema(fieldAnswerSchema), ...problemAnswers },
      },
    },
    (request) => pageAnswer(store.fields.list(pageRequest(request.query)), storedField),
  )

  app.get(
    '/v1/fields/:id',
    {
      schema: {
        tags,
        summary: 'One forecast',
        params: idParams,
        response: { 200: fieldAnswerSchema, ...problemAnswers },
      },
    },
    (request) => storedField(fieldOr404(request.params.id)),
  )

  app.get(
    '/v1/fields/:id/column',
    {
      schema: {
        tags,
        summary: 'A forecast over a place at a time',
        description:
          'Interpolated between grid points and valid times; JSON or CSV, by `?format=` or the Accept header.',
        params: idParams,
        querystring: columnQuery,
        response: {
          200: {
            description: 'The column',
            content: {
              'application/json': { schema: columnSchema },
              'text/csv': { schema: z.string() },
            },
          },
          ...problemAnswers,
        },
      },
    },
    (request, reply) => {
      const { id } = request.params
      fieldOr404(id)
      const { latitudeDeg, longitudeDeg, time, format } = request.query
      const { field, referenceTime } = airs.field({ kind: 'field', id, outside: 'refuse' })
      let levels
      try {
        levels = field
          .column(latitudeDeg * DEGREE, longitudeDeg * DEGREE, seconds(time))
          .map(columnLevel)
      } catch (error) {
        if (!(error instanceof OutsideField)) throw error
        const path = error.beyond === 'times' ? '?time' : '?latitudeDeg'
        throw faultyRequest(422, [{ path, message: outsideMessage(error) }])
      }
      reply.header('vary', 'accept')
      const accepted = request.accepts().type(['application/json', 'text/csv'])
      if (!format && !accepted) {
        throw new Problem(406, 'A column is answered as application/json or text/csv.')
      }
      if (format === 'csv' || (!format && accepted === 'text/csv')) {
        return reply.type('text/csv; charset=utf-8; header=present').send(columnCsv(levels))
      }
      return reply.send({
        fieldId: id,
        referenceTime: isoTime(referenceTime),
        latitudeDeg,
        longitudeDeg,
        time: isoTime(seconds(time)),
        levels,
      })
    },
  )

  app.delete(
    '/v1/fields/:id',
    {
      schema: {
        tags,
        summary: 'Delete a forecast that no run or flight uses',
        params: idParams,
        response: { 204: z.undefined().describe('Deleted'), ...problemAnswers },
      },
    },
    async (request, reply) => {
      const { id } = request.params
      const { runs, flights } = store.fields.uses(id)
      if (runs + flights > 0) {
        throw new Problem(
          409,
          `${runs} runs were flown in this forecast and ${flights} flights are planned in it: it is kept with them.`,
        )
      }
      if (!store.fields.remove(id)) throw notFound('forecast', id)
      airs.forgetField(id)
      await fieldFiles.remove(id)
      return reply.status(204).send()
    },
  )

  function fieldOr404(id: string): FieldRow {
    const row = store.fields.get(id)
    if (!row) throw notFound('forecast', id)
    return row
  }
}

/** A forecast as it is stored. */
export function fieldRow(answer: FieldAnswer): FieldRow {
  const { id, name, createdAt, referenceTime } = answer
  return {
    id,
    name,
    createdAt,
    referenceTime: seconds(referenceTime),
    summary: JSON.stringify(answer),
  }
}

function storedField(row: { summary: string }): FieldAnswer {
  return JSON.parse(row.summary) as FieldAnswer
}
