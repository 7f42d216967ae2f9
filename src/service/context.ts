import {
  type FastifyBaseLogger,
  type FastifyInstance,
  type FastifyTypeProvider,
  type RawReplyDefaultExpression,
  type RawRequestDefaultExpression,
  type RawServerDefault,
} from 'fastify'
import { type z } from 'zod'
import { type Fetcher } from '../fetching/fetcher.ts'
import { type PlanningPool } from '../planning/pool.ts'
import { type Store } from '../store/store.ts'
import { type Airs } from './airs.ts'
import { type EventStreams } from './eventStreams.ts'
import { type FieldFiles } from './fieldFiles.ts'
import { type JobRunner } from './jobRunner.ts'
import { type Watcher } from './watcher.ts'
import { type Webhooks } from './webhooks.ts'

/** What the routes work with. */
export interface Context {
  store: Store
  airs: Airs
  jobs: JobRunner
  pool: PlanningPool
  streams: EventStreams
  watcher: Watcher
  webhooks: Webhooks
  fetcher: Fetcher
  fieldFiles: FieldFiles
}

/** Requests have the types of their schemas; answers are checked against theirs by the tests. */
interface SchemaTypes extends FastifyTypeProvider {
  validator: this['schema'] extends z.ZodType ? z.output<this['schema']> : unknown
  serializer: unknown
}

/** The application, its requests typed by their zod schemas. */
export type App = FastifyInstance<
  RawServerDefault,
  RawRequestDefaultExpression,
  RawReplyDefaultExpression,
  FastifyBaseLogger,
  SchemaTypes
>
