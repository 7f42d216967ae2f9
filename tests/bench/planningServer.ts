import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { monitorEventLoopDelay } from 'node:perf_hooks'
import { buildApp } from '../../src/service/app.ts'
import { Store } from '../../src/store/store.ts'
import { MIGRATIONS } from '../service/harness.ts'

/** The whole service, and how late its event loop has been since the last time somebody asked, ms. */
const file = join(mkdtempSync(join(tmpdir(), 'driftbook-bench-')), 'bench.sqlite')
const app = await buildApp(new Store(file, MIGRATIONS), false, { warmPlanning: true })
const delay = monitorEventLoopDelay({ resolution: 1 })
delay.enable()
app.get('/loop', () => {
  const lateness = { max: delay.max / 1e6, p99: delay.percentile(99) / 1e6 }
  delay.reset()
  return lateness
})
console.log(await app.listen({ host: '127.0.0.1', port: 0 }))
