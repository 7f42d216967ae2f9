import { type App, type Context } from '../context.ts'
import { answerOrJob } from '../jobAnswers.ts'
import { problemAnswers } from '../schemas/common.ts'
import { jobSchema } from '../schemas/job.ts'
import { planOf } from '../schemas/plan.ts'
import { windowsAnswerSchema, windowsRequestSchema } from '../schemas/windows.ts'
import { type PlannedWindows } from '../windows.ts'

/** When. */
export function windowRoutes(app: App, { jobs }: Context): void {
  app.post(
    '/v1/windows',
    {
      schema: {
        tags: ['Planning'],
        summary: 'Fly release times over a span against limits and rank them',
        body: windowsRequestSchema,
        response: { 200: windowsAnswerSchema, 202: jobSchema, ...problemAnswers },
      },
    },
    (request, reply) => {
      const { plan, ...asked } = request.body
      const planned: PlannedWindows = { ...asked, plan: planOf(plan) }
      return answerOrJob(reply, jobs, jobs.run('windows', planned))
    },
  )
}
