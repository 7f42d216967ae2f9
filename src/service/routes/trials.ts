import { z } from 'zod'
import { type App, type Context } from '../context.ts'
import { flyTrial } from '../flying.ts'
import { problemAnswers } from '../schemas/common.ts'
import { flightRequestSchema, planOf } from '../schemas/plan.ts'
import { trialSchema } from '../schemas/run.ts'

/** Predictions that are not stored. */
export function trialRoutes(app: App, { airs }: Context): void {
  app.post(
    '/v1/trials',
    {
      schema: {
        tags: ['Trials'],
        summary: 'Predict a flight without storing anything',
        querystring: z.strictObject({
          track: z.enum(['true', 'false']).default('false').describe('Answer with the track'),
        }),
        body: flightRequestSchema,
        response: { 200: trialSchema, ...problemAnswers },
      },
    },
    (request) => flyTrial(planOf(request.body), airs, request.query.track === 'true'),
  )
}
