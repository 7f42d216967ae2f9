import { z } from 'zod'
import { type FlightWithRuns } from '../../store/flights.ts'
import { type App, type Context } from '../context.ts'
import { missOf, storedRun } from '../flightAnswer.ts'
import { now } from '../flying.ts'
import { notFound } from '../problems.ts'
import { idParams, problemAnswers } from '../schemas/common.ts'
import { outcomeAnswerSchema, outcomeSchema, type Outcome } from '../schemas/flight.ts'

const tags = ['Flights']

/** What happened when a flight was made, kept beside what was predicted. */
export function outcomeRoutes(app: App, { store }: Context): void {
  app.put(
    '/v1/flights/:id/outcome',
    {
      schema: {
        tags,
        summary: 'Keep what was observed, and see how far each run was off it',
        params: idParams,
        body: outcomeSchema,
        response: { 200: outcomeAnswerSchema, ...problemAnswers },
      },
    },
    (request) => {
      const flight = flightOr404(request.params.id)
      const outcome = request.body
      store.flights.update({ ...flight, outcome: JSON.stringify(outcome), updatedAt: now() })
      return answer(flight.id, outcome)
    },
  )

  app.get(
    '/v1/flights/:id/outcome',
    {
      schema: {
        tags,
        summary: 'What was observed, and how far each run was off it',
        params: idParams,
        response: { 200: outcomeAnswerSchema, ...problemAnswers },
      },
    },
    (request) => {
      const flight = flightOr404(request.params.id)
      if (flight.outcome === null) throw notFound('outcome of a flight', flight.id)
      return answer(flight.id, JSON.parse(flight.outcome) as Outcome)
    },
  )

  app.delete(
    '/v1/flights/:id/outcome',
    {
      schema: {
        tags,
        summary: 'Forget what was observed',
        params: idParams,
        response: { 204: z.undefined().describe('Forgotten'), ...problemAnswers },
      },
    },
    (request, reply) => {
      const flight = flightOr404(request.params.id)
      store.flights.update({ ...flight, outcome: null, updatedAt: now() })
      reply.status(204)
      return reply.send()
    },
  )

  function flightOr404(id: string): FlightWithRuns {
    const flight = store.flights.get(id)
    if (!flight) throw notFound('flight', id)
    return flight
  }

  function answer(flightId: string, outcome: Outcome) {
    const runs = store.runs.allAnswers(flightId)
    return { outcome, misses: runs.map((run) => missOf(storedRun(run), outcome)) }
  }
}
