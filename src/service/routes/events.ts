import { z } from 'zod'
import { type EventRow } from '../../store/events.ts'
import { type App, type Context } from '../context.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { faultyRequest, notFound, Problem } from '../problems.ts'
import { idParams, pageQuery, pageSchema, problemAnswers } from '../schemas/common.ts'
import { eventSchema, type FlightEvent } from '../schemas/event.ts'

/** Events read from the store at a time. */
const AT_A_TIME = 100

/** What happened to a flight's prediction. */
export function eventRoutes(app: App, { store, streams }: Context): void {
  app.get(
    '/v1/flights/:id/events',
    {
      schema: {
        tags: ['Watches'],
        summary: 'What happens to a flight’s prediction, as it happens or as a list',
        description:
          'Server-sent events named by their `kind`, from now on, or resumed after the event named by `Last-Event-ID` (`0`: from the first on). With `Accept: application/json` a list, newest first: the history of shifts.',
        params: idParams,
        querystring: pageQuery,
        headers: z.object({
          'last-event-id': z
            .string()
            .regex(
              /^(0|[0-9a-f]{8}(-[0-9a-f]{4}){3}-[0-9a-f]{12})$/,
              'must be the id of an event, or 0',
            )
            .optional()
            .describe('Send what came after this event'),
        }),
        response: {
          200: {
            description: 'The events',
            content: {
              'text/event-stream': { schema: z.string() },
              'application/json': { schema: pageSchema(eventSchema) },
            },
          },
          ...problemAnswers,
        },
      },
    },
    (request, reply) => {
      const { id } = request.params
      if (!store.flights.get(id)) throw notFound('flight', id)
      const type = request.accepts().type(['text/event-stream', 'application/json'])
      if (type === false) {
        throw new Problem(406, 'Events are answered as text/event-stream or application/json.')
      }
      if (type === 'application/json') {
        reply.header('vary', 'accept')
        return reply.send(
          pageAnswer(store.events.list(id, pageRequest(request.query)), storedEvent),
        )
      }
      if (request.query.cursor !== undefined) {
        const message =
          'is for lists: ask with Accept: application/json, or resume by Last-Event-ID'
        throw faultyRequest(400, [{ path: '?cursor', message }])
      }

      let last = request.headers['last-event-id'] ?? store.events.newestId(id)
      const stream = streams.start(reply)
      const sendNew = () => {
        for (;;) {
          const rows = store.events.after(id, last, AT_A_TIME)
          for (const row of rows) stream.send(row.kind, row.answer, row.id)
          last = rows.at(-1)?.id ?? last
          if (rows.length < AT_A_TIME) return
        }
      }
      stream.onClose(store.events.listen(sendNew))
      sendNew()
      return reply
    },
  )
}

function storedEvent({ answer }: EventRow): FlightEvent {
  return JSON.parse(answer) as FlightEvent
}
