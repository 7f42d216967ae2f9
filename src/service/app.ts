import { join } from 'node:path'
import { Readable } from 'node:stream'
import accepts from '@fastify/accepts'
import helmet from '@fastify/helmet'
import swagger from '@fastify/swagger'
import swaggerUi from '@fastify/swagger-ui'
import fastify, { type FastifyBaseLogger, type FastifyInstance } from 'fastify'
import { type z } from 'zod'
import { type Patience } from '../fetching/download.ts'
import { Fetcher } from '../fetching/fetcher.ts'
import { type SourceSettings } from '../fetching/sourceSettings.ts'
import { PlanningPool } from '../planning/pool.ts'
import { type Store } from '../store/store.ts'
import { Airs } from './airs.ts'
import { acceptJson } from './bodies.ts'
import { type App, type Context } from './context.ts'
import { dispersionWork } from './dispersions.ts'
import { EventStreams } from './eventStreams.ts'
import { JobRunner } from './jobRunner.ts'
import { FieldFiles } from './fieldFiles.ts'
import { fieldShelf } from './fieldShelf.ts'
import { describeRoute, describeSchemas, openApiInfo } from './openApi.ts'
import { servePage } from './page.ts'
import { answerError, faultyRequest, notThere, sendProblem } from './problems.ts'
import { dispersionRoutes } from './routes/dispersions.ts'
import { eventRoutes } from './routes/events.ts'
import { fieldRoutes } from './routes/fields.ts'
import { fillRoutes } from './routes/fills.ts'
import { flightRoutes } from './routes/flights.ts'
import { healthRoutes } from './routes/health.ts'
import { jobRoutes } from './routes/jobs.ts'
import { mapRoutes } from './routes/map.ts'
import { noticeRoutes } from './routes/notices.ts'
import { outcomeRoutes } from './routes/outcomes.ts'
import { profileRoutes } from './routes/profiles.ts'
import { rerunRoutes } from './routes/reruns.ts'
import { runRoutes } from './routes/runs.ts'
import { sourceRoutes } from './routes/sources.ts'
import { trialRoutes } from './routes/trials.ts'
import { watchRoutes } from './routes/watches.ts'
import { windowRoutes } from './routes/windows.ts'
import { schemaFaults } from './schemaFaults.ts'
import { foreignOrigin, type TileSource } from './tiles.ts'
import { warmUp } from './warmUp.ts'
import { Watcher } from './watcher.ts'
import { Webhooks, WEBHOOK_TIMING, type WebhookMode, type WebhookTiming } from './webhooks.ts'
import { windowsWork } from './windows.ts'

/**
 * What pages may load: nothing from elsewhere, but for the map tiles of an operator who named a source.
 * Plain HTTP is served, so nothing forces TLS.
 */
function securityHeaders(tiles: TileSource | null) {
  const elsewhere = foreignOrigin(tiles) ?? []
  return {
    strictTransportSecurity: false,
    contentSecurityPolicy: {
      useDefaults: false,
      directives: {
        defaultSrc: ["'self'"],
        baseUri: ["'self'"],
        connectSrc: ["'self'"].concat(elsewhere),
        formAction: ["'self'"],
        frameAncestors: ["'self'"],
        objectSrc: ["'none'"],
        imgSrc: ["'self'", 'data:', 'blob:'].concat(elsewhere),
        styleSrc: ["'self'", "'unsafe-inline'"],
        workerSrc: ["'self'"],
      },
    },
  }
}

export interface AppOptions {
  /** Start the planning threads with the service, not with the first request that needs them */
  warmPlanning?: boolean
  /** Off unless said otherwise: the service reaches out to nobody */
  webhooks?: WebhookMode
  webhookTiming?: Partial<WebhookTiming>
  /** Where forecasts are fetched from; nowhere unless given */
  sources?: readonly SourceSettings[]
  /** How patiently sources are asked */
  patience?: Patience
  /** What the page's map is drawn on; its own coasts alone unless given */
  tiles?: TileSource | null
  /** Folder of the forecasts' values; beside the database unless given */
  fieldDirectory?: string
  /** Longest forecast that is taken, bytes */
  fieldUploadLimit?: number
}

/** Builds the service on a store; it is not listening yet. */
export async function buildApp(
  store: Store,
  logger: FastifyBaseLogger | false,
  options: AppOptions = {},
): Promise<FastifyInstance> {
  const app = fastify({
    ...(logger ? { loggerInstance: logger } : {}),
    routerOptions: { maxParamLength: 200 },
    frameworkErrors: (error, request, reply) => void answerError(error, request, reply),
  })

  app.setValidatorCompiler(({ schema, httpPart }) => (data: unknown) => {
    if (Buffer.isBuffer(data) || data instanceof Readable) return { value: data } // an upload: its reader checks it
    const result = (schema as unknown as z.ZodType).safeParse(data, { reportInput: true })
    if (result.success) return { value: result.data }
    return { error: faultyRequest(400, schemaFaults(result.error, httpPart)) }
  })
  app.setSerializerCompiler(() => JSON.stringify)
  app.setErrorHandler(answerError)
  app.setNotFoundHandler((request, reply) => sendProblem(reply, notThere(request)))
  app.removeAllContentTypeParsers()
  acceptJson(app)

  // Plugins from elsewhere
  await app.register(helmet, securityHeaders(options.tiles ?? null))
  await app.register(accepts)
  await app.register(swagger, {
    openapi: openApiInfo,
    transform: describeRoute,
    transformObject: describeSchemas,
  })
  await app.register(swaggerUi, { routePrefix: '/docs' })

  // The routes
  const fieldDirectory = options.fieldDirectory ?? `${store.file}-fields`
  const fieldFiles = new FieldFiles(fieldDirectory, store.fields, options.fieldUploadLimit)
  const airs = new Airs(store.profiles, store.fields, (id) => fieldFiles.path(id))
  const pool = new PlanningPool()
  const jobs = new JobRunner(store, {
    dispersion: dispersionWork(airs, pool),
    windows: windowsWork(airs, pool),
  })
  const streams = new EventStreams()
  const watcher = new Watcher(store, airs, fieldFiles, app.log)
  const timing = { ...WEBHOOK_TIMING, ...options.webhookTiming }
  const webhooks = new Webhooks(store, options.webhooks ?? 'off', timing, app.log)
  const fetcher = new Fetcher(
    options.sources ?? [],
    store,
    fieldShelf({ store, airs, fieldFiles, watcher }),
    join(fieldDirectory, 'fetching'),
    options.patience,
  )
  app.addHook('onListen', () => {
    fetcher.start()
    watcher.wake() // what an earlier program left
    webhooks.wake()
  })
  app.addHook('preClose', async () => {
    await Promise.all([fetcher.close(), jobs.close(), watcher.close(), webhooks.close()])
    streams.close()
  })
  app.addHook('onClose', async () => {
    await pool.close()
    await fieldFiles.close()
    airs.close()
  })
  if (options.warmPlanning) app.addHook('onListen', () => warmUp(pool))
  const context: Context = {
    store,
    airs,
    jobs,
    pool,
    fieldFiles,
    streams,
    watcher,
    webhooks,
    fetcher,
  }
  const typed = app as unknown as App
  flightRoutes(typed, context)
  runRoutes(typed, context)
  sourceRoutes(typed, context)
  noticeRoutes(typed, context)
  rerunRoutes(typed, context)
  trialRoutes(typed, context)
  outcomeRoutes(typed, context)
  watchRoutes(typed, context)
  eventRoutes(typed, context)
  fillRoutes(typed, context)
  dispersionRoutes(typed, context)
  windowRoutes(typed, context)
  jobRoutes(typed, context)
  await app.register((scope) => {
    profileRoutes(scope, context)
    return Promise.resolve()
  })
  await app.register((scope) => {
    fieldRoutes(scope, context)
    return Promise.resolve()
  })
  healthRoutes(typed, context)
  await app.register((scope) => mapRoutes(scope, options.tiles ?? null))
  await servePage(app)
  return app
}
