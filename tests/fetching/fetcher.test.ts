import { existsSync, mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import request from 'supertest'
import { expect, it, onTestFinished } from 'vitest'
import { Fetcher, type FieldShelf } from '../../src/fetching/fetcher.ts'
import { newestRun, type SourceSettings } from '../../src/fetching/sourceSettings.ts'
import { buildApp } from '../../src/service/app.ts'
import { type Source } from '../../src/service/schemas/source.ts'
import { Store } from '../../src/store/store.ts'
import { MIGRATIONS } from '../service/harness.ts'
import { until } from '../service/watching.ts'
import { FORECAST, startMirror, STEP, type MirrorOptions } from './mirror.ts'

/** A shelf that keeps what it is given, in place of the tables of fields. */
class MemoryShelf implements FieldShelf {
  readonly fields = new Map<string, Buffer>()
  readonly used = new Set<string>()
  private count = 0

  store = async (chunks: AsyncIterable<Uint8Array>) => {
    const parts: Uint8Array[] = []
    for await (const chunk of chunks) parts.push(chunk)
    const id = `0190d0a0-0000-7000-8000-${String(++this.count).padStart(12, '0')}`
    this.fields.set(id, Buffer.concat(parts))
    return { id, bytes: Buffer.concat(parts).length }
  }

  remove = (id: string) => Promise.resolve(!this.used.has(id) && this.fields.delete(id))
}

async function startSources(settings: Partial<SourceSettings> = {}, options: MirrorOptions = {}) {
  const { address, mirror, requests } = await startMirror(options)
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-fetcher-'))
  const store = new Store(join(folder, 'a.sqlite'), MIGRATIONS)
  const source: SourceSettings = {
    name: 'mirror',
    url: `${address}/{runYear}{runMonth}{runDay}{runHour}.f{step}.grib2`,
    region: '',
    runs: '0 0 1 1 *', // once a year: what else is fetched was asked for
    availableAfterS: 0,
    stepHours: [STEP],
    keepRuns: 2,
    diskBudgetMB: 1,
    lookAgainAfterS: 3600,
    ...settings,
  }
  const shelf = new MemoryShelf()
  const patience = { attempts: 2, firstDelay: 5, stall: 500 }
  const fetcher = new Fetcher([source], store, shelf, join(folder, 'fetching'), patience)
  const app = await buildApp(store, false, { fetcher })
  await app.listen({ host: '127.0.0.1', port: 0 })
  onTestFinished(async () => {
    await app.close()
    store.close()
    rmSync(folder, { recursive: true })
  })
  const http = request(app.server)
  const look = async () => (await http.get('/v1/sources/mirror').expect(200)).body as Source
  const ended = () => until(async () => (await look()).lastFetch?.state !== 'running')
  /** Fetches the run of a year later than that of the start, and waits until that has ended. */
  const fetchRun = async (year: number) => {
    await http.post(`/v1/sources/mirror/fetch?run=${year}-06-01T00:00:00Z`).expect(202)
    await ended()
    return look()
  }
  await until(async () => (await look()).lastFetch !== null)
  await ended()
  return { http, look, fetchRun, ended, shelf, mirror, requests, source, store, folder }
}

it('a source is fetched as soon as the service listens, and tells so', async () => {
  const { http, shelf, look, source, folder } = await startSources()
  const list = await http.get('/v1/sources').expect(200)
  const found = await look()
  expect(list.body).toEqual({ items: [found] })
  const run = newestRun(source, Date.now() / 1000) ?? 0
  expect(found.lastFetch).toMatchObject({
    run: new Date(run * 1000).toISOString(),
    state: 'stored',
    bytes: FORECAST.length,
    complaint: null,
  })
  expect(found.kept).toEqual([found.lastFetch])
  expect([...shelf.fields.values()].map((bytes) => bytes.equals(FORECAST))).toEqual([true])
  expect(Date.parse(found.nextLookAt ?? '')).toBeGreaterThan(Date.now())
  await until(() => !existsSync(join(folder, 'fetching', 'mirror')))
  const again = await http.post('/v1/sources/mirror/fetch').expect(409)
  expect((again.body as { detail: string }).detail).toContain('kept already')
  await http.post('/v1/sources/other/fetch').expect(404)
})

it('the last runs are kept, as many as it may be, but for those in use', async () => {
  const { fetchRun, look, shelf } = await startSources()
  const first = (await look()).kept[0].fieldId ?? ''
  const second = (await fetchRun(2090)).kept[0].fieldId ?? ''
  shelf.used.add(second)
  await fetchRun(2091)
  await until(async () => (await look()).kept.length === 2)
  expect(shelf.fields.has(first)).toBe(false)
  await fetchRun(2092)
  const third = (await fetchRun(2093)).kept[0].fieldId ?? ''
  await until(() => shelf.fields.size === 3)
  expect([...shelf.fields.keys()]).toContain(second)
  expect([...shelf.fields.keys()]).toContain(third)
})

it('the disk budget is kept to, though the newest stays', async () => {
  const diskBudgetMB = (1.5 * FORECAST.length) / 1e6
  const { fetchRun, look, shelf } = await startSources({ keepRuns: 9, diskBudgetMB })
  await fetchRun(2090)
  await until(async () => (await look()).kept.length === 1)
  expect((await look()).kept[0].run).toBe('2090-06-01T00:00:00.000Z')
  expect(shelf.fields.size).toBe(1)
})

it('a bad run replaces nothing, says why, and is looked for again', async () => {
  const { fetchRun, look, mirror, shelf, http } = await startSources()
  const good = (await look()).kept
  mirror.file = FORECAST.subarray(0, 60_000)
  const after = await fetchRun(2090)
  expect(after.lastFetch).toMatchObject({ state: 'failed', fieldId: null })
  expect(after.lastFetch?.complaint).toContain('ends inside the message')
  expect(after.kept).toEqual(good)
  expect(shelf.fields.size).toBe(1)
  mirror.file = FORECAST
  expect((await fetchRun(2090)).lastFetch?.state).toBe('stored')
  // An older run than what is kept is not fetched.
  await http.post('/v1/sources/mirror/fetch?run=2011-01-10T12:00:00Z').expect(409)
})

it('a run that fails is looked for again after a while', async () => {
  let fail = true
  const { look, source } = await startSources(
    { lookAgainAfterS: 1 },
    {
      mischief: (_request, response) => {
        if (fail) response.writeHead(404).end()
        return fail
      },
    },
  )
  const failed = await look()
  expect(failed.lastFetch).toMatchObject({ state: 'failed' })
  const wait = Date.parse(failed.nextLookAt ?? '') - Date.parse(failed.lastFetch?.finishedAt ?? '')
  expect(wait).toBe(source.lookAgainAfterS * 1000)
  fail = false
  await until(async () => (await look()).lastFetch?.state === 'stored')
})

it('a stop interrupts a fetch, and the next start goes on with it', async () => {
  const { address, mirror, requests } = await startMirror()
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-fetcher-'))
  onTestFinished(() => {
    rmSync(folder, { recursive: true })
  })
  const source: SourceSettings = {
    name: 'mirror',
    url: `${address}/f{step}.grib2`,
    region: '',
    runs: '0 0 1 1 *',
    availableAfterS: 0,
    stepHours: [0, 3],
    keepRuns: 2,
    diskBudgetMB: 1,
    lookAgainAfterS: 3600,
  }
  mirror.mischief = ({ path }) => path === '/f3.grib2' // is never answered
  const shelf = new MemoryShelf()
  const start = () => {
    const store = new Store(join(folder, 'a.sqlite'), MIGRATIONS)
    const fetcher = new Fetcher([source], store, shelf, join(folder, 'fetching'))
    fetcher.start()
    return { store, fetcher }
  }
  const first = start()
  await until(() => requests.length === 2)
  await first.fetcher.close()
  expect(first.store.fetches.latest('mirror')?.state).toBe('interrupted')
  first.store.close()
  mirror.mischief = () => false
  const second = start()
  await until(() => second.store.fetches.latest('mirror')?.state === 'stored')
  await second.fetcher.close()
  second.store.close()
  expect(requests.map(({ path }) => path)).toEqual(['/f0.grib2', '/f3.grib2', '/f3.grib2'])
  expect([...shelf.fields.values()].map(({ length }) => length)).toEqual([2 * FORECAST.length])
  expect(readdirSync(folder)).not.toContain('mirror')
})
