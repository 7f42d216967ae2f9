import { z } from 'zod'
import { type JobRow } from '../../store/jobs.ts'
import { type App, type Context } from '../context.ts'
import { answerOrJob, jobAnswer } from '../jobAnswers.ts'
import { pageAnswer, pageRequest } from '../paging.ts'
import { Problem } from '../problems.ts'
import { idParams, pageQuery, pageSchema, problemAnswers } from '../schemas/common.ts'
import { jobSchema } from '../schemas/job.ts'

const tags = ['Jobs']
const anyAnswer = z.looseObject({}).describe('What the request would have been answered with')

/** Calculations that take longer than two seconds. */
export function jobRoutes(app: App, { store, jobs, streams }: Context): void {
  app.get(
    '/v1/jobs',
    {
      schema: {
        tags,
        summary: 'List jobs, newest first',
        querystring: pageQuery,
        response: { 200: pageSchema(jobSchema), ...problemAnswers },
      },
    },
    (request) =>
      pageAnswer(store.jobs.list(pageRequest(request.query)), (row) =>
        jobAnswer(row, jobs.progress(row.id)),
      ),
  )

  app.get(
    '/v1/jobs/:id',
    {
      schema: {
        tags,
        summary: 'How far a job is',
        params: idParams,
        response: { 200: jobSchema, ...problemAnswers },
      },
    },
    ({ params: { id } }) => jobAnswer(jobs.get(id), jobs.progress(id)),
  )

  app.get(
    '/v1/jobs/:id/answer',
    {
      schema: {
        tags,
        summary: 'What a finished job was worked out to',
        params: idParams,
        response: { 200: anyAnswer, ...problemAnswers },
      },
    },
    ({ params: { id } }, reply) => {
      const { state } = jobs.get(id)
      const answer = store.jobs.answer(id)
      if (answer === null) throw new Problem(409, `The job is ${state}: it has no answer.`)
      return reply.type('application/json; charset=utf-8').send(answer)
    },
  )

  app.get(
    '/v1/jobs/:id/events',
    {
      schema: {
        tags,
        summary: 'A job’s progress as server-sent events, until it ends',
        description:
          'Events `progress`, then one of `done`, `failed`, `cancelled` and `interrupted`; the data of each is the job.',
        params: idParams,
        response: {
          200: {
            description: 'Server-sent events',
            content: { 'text/event-stream': { schema: z.string() } },
          },
          ...problemAnswers,
        },
      },
    },
    ({ params: { id } }, reply) => {
      const row = jobs.get(id)
      const stream = streams.start(reply)
      const send = (job: JobRow, share: number | null) => {
        const event = job.state === 'running' ? 'progress' : job.state
        stream.send(event, JSON.stringify(jobAnswer(job, share)))
      }
      if (row.state === 'running') send(row, jobs.progress(id))
      const stop = jobs.watch(id, {
        progress: (share) => {
          send(row, share)
        },
        end: (ended) => {
          send(ended, null)
          stream.end()
        },
      })
      stream.onClose(stop)
    },
  )

  app.post(
    '/v1/jobs/:id/cancel',
    {
      schema: {
        tags,
        summary: 'Stop a running job',
        params: idParams,
        response: { 200: jobSchema, ...problemAnswers },
      },
    },
    async ({ params: { id } }) => jobAnswer(await jobs.cancel(id), null),
  )

  app.post(
    '/v1/jobs/:id/repeat',
    {
      schema: {
        tags,
        summary: 'Work out again what a job was asked, as a new job or answered at once',
        params: idParams,
        response: { 200: anyAnswer, 202: jobSchema, ...problemAnswers },
      },
    },
    ({ params: { id } }, reply) => answerOrJob(reply, jobs, jobs.repeat(id)),
  )
}
