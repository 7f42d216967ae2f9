import { z } from 'zod'
import { NotFetched } from '../../fetching/fetcher.ts'
import { type SourceSettings } from '../../fetching/sourceSettings.ts'
import { type FetchRow } from '../../store/fetches.ts'
import { type App, type Context } from '../context.ts'
import { Problem } from '../problems.ts'
import { problemAnswers, timeSchema } from '../schemas/common.ts'
import { sourceSchema, type Source, type SourceFetch } from '../schemas/source.ts'
import { isoTime, seconds } from '../units.ts'

const tags = ['Sources']
const nameParams = z.object({ name: z.string().max(64) })

/** Configured sources of forecasts. */
export function sourceRoutes(app: App, { store, fetcher }: Context): void {
  app.get(
    '/v1/sources',
    {
      schema: {
        tags,
        summary: 'The configured sources of forecasts, each with its last fetch',
        response: { 200: z.object({ items: z.array(sourceSchema) }), ...problemAnswers },
      },
    },
    () => ({ items: fetcher?.sources.map(answer) ?? [] }),
  )

  app.get(
    '/v1/sources/:name',
    {
      schema: {
        tags,
        summary: 'One source',
        params: nameParams,
        response: { 200: sourceSchema, ...problemAnswers },
      },
    },
    (request) => answer(sourceOr404(request.params.name).source),
  )

  app.post(
    '/v1/sources/:name/fetch',
    {
      schema: {
        tags,
        summary: 'Fetch the newest run now',
        description:
          'Answered when the fetch has begun; the source tells how it ends. A fetch that is under way is let go on.',
        params: nameParams,
        querystring: z.strictObject({
          run: timeSchema.optional().describe('Fetch this run instead of the newest'),
        }),
        response: { 202: sourceSchema, ...problemAnswers },
      },
    },
    async (request, reply) => {
      const { fetcher: found, source } = sourceOr404(request.params.name)
      const { run } = request.query
      try {
        await found.fetchNow(source, run === undefined ? undefined : seconds(run))
      } catch (error) {
        if (error instanceof NotFetched) throw new Problem(409, error.message)
        throw error
      }
      return reply.status(202).send(answer(source))
    },
  )

  function sourceOr404(name: string) {
    const source = fetcher?.sources.find((one) => one.name === name)
    if (!fetcher || !source) {
      throw new Problem(404, `There is no source named ${name}: see GET /v1/sources.`)
    }
    return { fetcher, source }
  }

  function answer(source: SourceSettings): Source {
    const { name, runs, availableAfterS, stepHours, keepRuns, diskBudgetMB } = source
    const last = store.fetches.latest(name)
    const nextLook = fetcher?.nextLook(source) ?? null
    return {
      name,
      runs,
      availableAfterS,
      stepHours,
      keepRuns,
      diskBudgetMB,
      nextLookAt: nextLook === null ? null : isoTime(nextLook),
      lastFetch: last ? fetchAnswer(last) : null,
      kept: store.fetches.stored(name).map(fetchAnswer),
    }
  }
}

function fetchAnswer(row: FetchRow): SourceFetch {
  const { runTime, state, fieldId, bytes, complaint, startedAt, finishedAt } = row
  return { run: isoTime(runTime), state, fieldId, bytes, complaint, startedAt, finishedAt }
}
