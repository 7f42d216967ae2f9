import { type App, type Context } from '../context.ts'
import { type PlannedDispersion } from '../dispersions.ts'
import { storedPlan } from '../flightAnswer.ts'
import { answerOrJob } from '../jobAnswers.ts'
import { notFound } from '../problems.ts'
import { idParams, problemAnswers } from '../schemas/common.ts'
import {
  dispersionAnswerSchema,
  dispersionRequestSchema,
  trialDispersionRequestSchema,
} from '../schemas/dispersion.ts'
import { jobSchema } from '../schemas/job.ts'
import { planOf } from '../schemas/plan.ts'

const tags = ['Planning']
const response = { 200: dispersionAnswerSchema, 202: jobSchema, ...problemAnswers }

/** How sure. */
export function dispersionRoutes(app: App, { store, jobs }: Context): void {
  app.post(
    '/v1/flights/:id/dispersion',
    {
      schema: {
        tags,
        summary: 'Strew what is uncertain about a stored flight and see where it lands',
        params: idParams,
        body: dispersionRequestSchema,
        response,
      },
    },
    (request, reply) => {
      const { id } = request.params
      const flight = store.flights.get(id)
      if (!flight) throw notFound('flight', id)
      const planned: PlannedDispersion = {
        flightId: id,
        plan: storedPlan(flight),
        ...request.body,
      }
      return answerOrJob(reply, jobs, jobs.run('dispersion', planned))
    },
  )

  app.post(
    '/v1/trials/dispersion',
    {
      schema: {
        tags,
        summary: 'Strew what is uncertain about a plan without storing it',
        body: trialDispersionRequestSchema,
        response,
      },
    },
    (request, reply) => {
      const { plan, ...asked } = request.body
      const planned: PlannedDispersion = { flightId: null, plan: planOf(plan), ...asked }
      return answerOrJob(reply, jobs, jobs.run('dispersion', planned))
    },
  )
}
