import { z } from 'zod'
import { type WatchRow } from '../../store/watches.ts'
import { type App, type Context } from '../context.ts'
import { storedRun } from '../flightAnswer.ts'
import { now } from '../flying.ts'
import { toldFirst, webhookKinds } from '../keeping.ts'
import { notFound } from '../problems.ts'
import { idParams, problemAnswers } from '../schemas/common.ts'
import { watchRequestSchema, watchSchema, type Watch, type WatchRequest } from '../schemas/watch.ts'
import { isoTime } from '../units.ts'

const tags = ['Watches']

/** Flights that keep themselves current. */
export function watchRoutes(app: App, { store, webhooks }: Context): void {
  app.put(
    '/v1/flights/:id/watch',
    {
      schema: {
        tags,
        summary: 'Fly the flight again whenever better air arrives',
        description:
          'A sounding covers the flight that was observed within `withinM` of the launch and `withinS` of the release. It is better than the air of the newest run where its age at the release, with 1 s for every 15 m of distance, is less; among equals, where it was uploaded later. Flights whose newest run has landed, or whose outcome is known, are left as they are. Of soundings that arrive together the best is flown.',
        params: idParams,
        body: watchRequestSchema,
        response: { 200: watchSchema, ...problemAnswers },
      },
    },
    async (request) => {
      const { id } = request.params
      if (request.body.webhook) webhooks.mustBeOn()
      await store.commit(() => {
        const flight = store.flights.get(id)
        if (!flight) throw notFound('flight', id)
        const earlier = store.watches.get(id)
        const toldRunId = toldFirst(storedRun(flight.latestAnswer), earlier)
        store.watches.put(watchRow(id, request.body, toldRunId, earlier))
        if (!request.body.webhook) store.deliveries.removeAll(id)
      })
      return watchOr404(id)
    },
  )

  app.get(
    '/v1/flights/:id/watch',
    {
      schema: {
        tags,
        summary: 'How the flight is watched',
        params: idParams,
        response: { 200: watchSchema, ...problemAnswers },
      },
    },
    (request) => watchOr404(request.params.id),
  )

  app.delete(
    '/v1/flights/:id/watch',
    {
      schema: {
        tags,
        summary: 'Watch the flight no longer',
        params: idParams,
        response: { 204: z.undefined().describe('No longer watched'), ...problemAnswers },
      },
    },
    (request, reply) => {
      const { id } = request.params
      if (!store.watches.remove(id)) throw notFound('watch of a flight', id)
      reply.status(204)
      return reply.send()
    },
  )

  function watchOr404(id: string): Watch {
    const row = store.watches.get(id)
    if (!row) throw notFound('watch of a flight', id)
    const owed = store.deliveries.owed(id).map(({ eventId, attempts, dueAt, complaint }) => ({
      eventId,
      attempts,
      nextAttemptAt: isoTime(dueAt),
      complaint,
    }))
    return {
      flightId: id,
      createdAt: row.createdAt,
      updatedAt: row.updatedAt,
      tellBeyondM: row.tellBeyond,
      withinM: row.within,
      withinS: row.withinTime,
      toldRunId: row.toldRunId,
      webhook:
        row.webhookUrl === null ? null : { url: row.webhookUrl, kinds: webhookKinds(row), owed },
    }
  }
}

function watchRow(
  flightId: string,
  { tellBeyondM, withinM, withinS, webhook }: WatchRequest,
  toldRunId: string,
  earlier: WatchRow | undefined,
): WatchRow {
  const updatedAt = now()
  return {
    flightId,
    tellBeyond: tellBeyondM,
    within: withinM,
    withinTime: withinS,
    toldRunId,
    webhookUrl: webhook?.url ?? null,
    webhookSecret: webhook?.secret ?? null,
    webhookKinds: webhook ? JSON.stringify(webhook.kinds) : null,
    createdAt: earlier?.createdAt ?? updatedAt,
    updatedAt,
  }
}
