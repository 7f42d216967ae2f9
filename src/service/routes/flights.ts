import { v7 as uuid } from 'uuid'
import { z } from 'zod'
import { type FlightFilter, type FlightRow } from '../../store/flights.ts'
import { fieldIdOf, profileIdOf } from '../airs.ts'
import { type App, type Context } from '../context.ts'
import { answerCreation } from '../creating.ts'
import { flightAnswer, storedFlight, storedPlan } from '../flightAnswer.ts'
import { flyRun, flyTrial, now } from '../flying.ts'
import { keepRun } from '../keeping.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { changedPlan } from '../planChange.ts'
import { notFound } from '../problems.ts'
import {
  creatingHeaders,
  idParams,
  pageQuery,
  pageSchema,
  problemAnswers,
  timeSchema,
} from '../schemas/common.ts'
import { flightChangeSchema, flightSchema } from '../schemas/flight.ts'
import { flightRequestSchema, planOf, type Plan } from '../schemas/plan.ts'
import { runSchema } from '../schemas/run.ts'
import { seconds } from '../units.ts'

const tags = ['Flights']

const filterQuery = pageQuery.extend({
  launchFrom: timeSchema.optional().describe('Released at this time or later'),
  launchTo: timeSchema.optional().describe('Released before this time'),
  title: z.string().max(200).optional().describe('Title contains this, whatever the case'),
})

/** Planned flights. */
export function flightRoutes(app: App, { store, airs }: Context): void {
  app.post(
    '/v1/flights',
    {
      schema: {
        tags,
        summary: 'Store a planned flight and predict it',
        headers: creatingHeaders,
        body: flightRequestSchema,
        response: {
          201: z.object({ flight: flightSchema, run: runSchema }),
          ...problemAnswers,
        },
      },
    },
    (request, reply) =>
      answerCreation(request, reply, store, () => {
        const plan = planOf(request.body)
        const flight = newFlight(request.body.title, plan)
        const made = flyRun(flight.id, plan, null, airs)
        const { run } = made
        return {
          location: `/v1/flights/${flight.id}`,
          answer: { flight: flightAnswer(flight, 1, run), run },
          store: () => {
            store.flights.insert(flight)
            keepRun(store, made)
          },
        }
      }),
  )

  app.get(
    '/v1/flights',
    {
      schema: {
        tags,
        summary: 'List flights, newest first',
        querystring: filterQuery,
        response: { 200: pageSchema(flightSchema), ...problemAnswers },
      },
    },
    (request) => {
      const filter = flightFilter(request.query)
      return pageAnswer(store.flights.list(filter, pageRequest(request.query)), storedFlight)
    },
  )

  app.get(
    '/v1/flights/:id',
    {
      schema: {
        tags,
        summary: 'One flight',
        params: idParams,
        response: { 200: flightSchema, ...problemAnswers },
      },
    },
    (request) => flightOr404(request.params.id),
  )

  app.patch(
    '/v1/flights/:id',
    {
      schema: {
        tags,
        summary: 'Change the title or the plan',
        description:
          'Members not sent stay. The runs keep the plans they flew; the changed plan must be flyable, and is flown with the next run.',
        params: idParams,
        body: flightChangeSchema,
        response: { 200: flightSchema, ...problemAnswers },
      },
    },
    (request) => {
      const { id } = request.params
      const row = store.flights.get(id)
      if (!row) throw notFound('flight', id)
      const { title, ...change } = request.body
      const before = storedPlan(row)
      const plan = changedPlan(before, change)
      if (JSON.stringify(plan) !== JSON.stringify(before)) flyTrial(plan, airs) // must be flyable
      store.flights.update({
        ...row,
        ...planColumns(plan),
        title: title ?? row.title,
        updatedAt: now(),
      })
      return flightOr404(id)
    },
  )

  app.delete(
    '/v1/flights/:id',
    {
      schema: {
        tags,
        summary: 'Delete a flight with its runs',
        params: idParams,
        response: { 204: z.undefined().describe('Deleted'), ...problemAnswers },
      },
    },
    (request, reply) => {
      const { id } = request.params
      if (!store.flights.remove(id)) throw notFound('flight', id)
      reply.status(204)
      return reply.send()
    },
  )

  function flightOr404(id: string) {
    const row = store.flights.get(id)
    if (!row) throw notFound('flight', id)
    return storedFlight(row)
  }
}

/** The store's filter from the times and title of a request. */
export function flightFilter(wanted: {
  launchFrom?: string | undefined
  launchTo?: string | undefined
  title?: string | undefined
}): FlightFilter {
  const { launchFrom, launchTo, title } = wanted
  return {
    launchFrom: launchFrom === undefined ? null : seconds(launchFrom),
    launchTo: launchTo === undefined ? null : seconds(launchTo),
    title: title ?? null,
  }
}

function newFlight(title: string, plan: Plan): FlightRow {
  const createdAt = now()
  return {
    id: uuid(),
    title,
    createdAt,
    updatedAt: createdAt,
    outcome: null,
    ...planColumns(plan),
  }
}

function planColumns(plan: Plan) {
  return {
    launchTime: seconds(plan.launch.time),
    profileId: profileIdOf(plan.air),
    fieldId: fieldIdOf(plan.air),
    plan: JSON.stringify(plan),
  }
}
