import { type App, type Context } from '../context.ts'
import { fillAnswer } from '../fills.ts'
import { problemAnswers } from '../schemas/common.ts'
import { fillAnswerSchema, fillRequestSchema } from '../schemas/fill.ts'

/** How much gas. */
export function fillRoutes(app: App, { airs }: Context): void {
  app.post(
    '/v1/fills',
    {
      schema: {
        tags: ['Planning'],
        summary: 'Find the fill that reaches a rate, a burst altitude or a flight time',
        body: fillRequestSchema,
        response: { 200: fillAnswerSchema, ...problemAnswers },
      },
    },
    (request) => fillAnswer(request.body, airs),
  )
}
