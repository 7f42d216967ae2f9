import { pino } from 'pino'
import { readConfig } from './config.ts'
import { addDemo, demoTable } from './demo.ts'
import { readSources } from './fetching/sourceSettings.ts'
import { buildApp } from './service/app.ts'
import { openTiles } from './service/tiles.ts'
import { Store } from './store/store.ts'

const MIGRATIONS = new URL('../migrations', import.meta.url).pathname

/** How long requests under way may take to end when the program is stopped. */
const GRACE_MS = 2000

/** Starts the service; resolves when it listens. */
async function start(): Promise<void> {
  const config = readConfig(process.env)
  const tiles = config.tiles && openTiles(config.tiles)
  // People read standard output; the log goes to standard error.
  const logger = pino({ level: config.logLevel }, pino.destination(2))
  const store = new Store(config.databaseFile, MIGRATIONS)
  const app = await buildApp(store, logger, {
    warmPlanning: true,
    webhooks: config.webhooks,
    sources: config.sourcesFile === null ? [] : readSources(config.sourcesFile),
    tiles,
    fieldDirectory: config.fieldDirectory,
  })

  const stop = async () => {
    // Browsers hold connections open on which they never asked anything: they are not waited for.
    const grace = setTimeout(() => {
      app.server.closeAllConnections()
    }, GRACE_MS)
    await app.close()
    clearTimeout(grace)
    store.close()
  }
  for (const signal of ['SIGINT', 'SIGTERM'] as const) {
    process.once(signal, () => void stop())
  }

  const address = await app.listen({ host: config.host, port: config.port })
  if (config.demo) {
    const run = await addDemo(app, store)
    if (run) console.log(demoTable(run))
  }
  console.log(`Driftbook serves on ${address}`)
}

try {
  await start()
} catch (error) {
  console.error(
    `Driftbook did not start: ${error instanceof Error ? error.message : String(error)}`,
  )
  process.exit(1)
}
