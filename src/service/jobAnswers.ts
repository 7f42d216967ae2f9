import { type FastifyReply } from 'fastify'
import { type JobRow } from '../store/jobs.ts'
import { type JobKind, type JobRunner } from './jobRunner.ts'
import { type JobAnswer } from './schemas/job.ts'

/** A job in the names of the API. */
export function jobAnswer(row: JobRow, progress: number | null): JobAnswer {
  return {
    id: row.id,
    kind: row.kind as JobKind,
    state: row.state,
    progress: row.state === 'done' ? 1 : (progress ?? 0),
    createdAt: row.createdAt,
    finishedAt: row.finishedAt,
    problem: row.problem === null ? null : (JSON.parse(row.problem) as JobAnswer['problem']),
  }
}

/** Answers with what a request was worked out to, or with 202 and the job that goes on. */
export async function answerOrJob(
  reply: FastifyReply,
  jobs: JobRunner,
  working: ReturnType<JobRunner['run']>,
): Promise<FastifyReply> {
  const outcome = await working
  if ('answer' in outcome) {
    return reply.type('application/json; charset=utf-8').send(outcome.answer)
  }
  const { job } = outcome
  return reply
    .status(202)
    .header('location', `/v1/jobs/${job.id}`)
    .send(jobAnswer(job, jobs.progress(job.id)))
}
