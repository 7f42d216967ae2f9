import { existsSync, mkdtempSync, readdirSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import request from 'supertest'
import { expect, it, onTestFinished } from 'vitest'
import { newestRun, type SourceSettings } from '../../src/fetching/sourceSettings.ts'
import { buildApp } from '../../src/service/app.ts'
import { type Run } from '../../src/service/schemas/run.ts'
import { type Source } from '../../src/service/schemas/source.ts'
import { Store } from '../../src/store/store.ts'
import { flightRequest, MIGRATIONS } from '../service/harness.ts'
import { until } from '../service/watching.ts'
import { forecastOf, serveFile, startMirror, STEP } from './mirror.ts'

/** A service with one source, whose mirror serves the real forecast as that of the run asked for. */
async function startSources(settings: Partial<SourceSettings> = {}) {
  const { address, mirror, requests } = await startMirror()
  let cut = Infinity
  mirror.mischief = (asked, response) => {
    const [, year, month] = /^\/(\d{4})(\d{2})/.exec(asked.path) ?? []
    const file = forecastOf(Number(year), Number(month)).subarray(0, cut)
    serveFile(response, asked, { ...mirror, file })
    return true
  }
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
    diskBudgetMB: 100,
    lookAgainAfterS: 3600,
    ...settings,
  }
  const fieldDirectory = join(folder, 'fields')
  const patience = { attempts: 2, firstDelay: 5, stall: 500 }
  const app = await buildApp(store, false, { sources: [source], patience, fieldDirectory })
  await app.listen({ host: '127.0.0.1', port: 0 })
  onTestFinished(async () => {
    await app.close()
    store.close()
    rmSync(folder, { recursive: true })
  })
  const http = request(app.server)
  const look = async () => (await http.get('/v1/sources/mirror').expect(200)).body as Source
  const ended = async () => {
    await until(async () => ((await look()).lastFetch?.state ?? 'running') !== 'running')
    const stored = (await look()).lastFetch?.state === 'stored' // then room is made, and tidied up
    await until(() => !stored || !existsSync(join(fieldDirectory, 'fetching', 'mirror')))
  }
  /** Fetches the run of a year's 1 June, and waits until that has ended. */
  const fetchRun = async (year: number) => {
    await http.post(`/v1/sources/mirror/fetch?run=${year}-06-01T00:00:00Z`).expect(202)
    await ended()
    return look()
  }
  const files = () => readdirSync(fieldDirectory).filter((name) => name.endsWith('.field'))
  await ended()
  return {
    http,
    look,
    fetchRun,
    files,
    requests,
    source,
    store,
    cutAt: (bytes: number) => (cut = bytes),
  }
}

it('a source is fetched as soon as the service listens, and its field can be flown in', async () => {
  const { http, look, source, files } = await startSources()
  const list = await http.get('/v1/sources').expect(200)
  const found = await look()
  expect(list.body).toEqual({ items: [found] })
  const run = newestRun(source, Date.now() / 1000) ?? 0
  const { lastFetch } = found
  expect(lastFetch).toMatchObject({ run: new Date(run * 1000).toISOString(), state: 'stored' })
  expect(found.kept).toEqual([lastFetch])
  expect(Date.parse(found.nextLookAt ?? '')).toBeGreaterThan(Date.now())
  const field = await http.get(`/v1/fields/${lastFetch?.fieldId ?? ''}`).expect(200)
  expect(field.body).toMatchObject({ referenceTime: lastFetch?.run, levelsHPa: [500, 250] })
  expect(files()).toEqual([`${lastFetch?.fieldId ?? ''}.field`])
  const again = await http.post('/v1/sources/mirror/fetch').expect(409)
  expect((again.body as { detail: string }).detail).toContain('kept already')
  await http.post('/v1/sources/other/fetch').expect(404)
})

it('the last runs are kept, as many as it may be', async () => {
  const { fetchRun, look, files } = await startSources()
  for (const year of [2090, 2091, 2092]) await fetchRun(year)
  await until(async () => (await look()).kept.length === 2)
  const { kept } = await look()
  expect(kept.map(({ run }) => run.slice(0, 4))).toEqual(['2092', '2091'])
  await until(() => files().length === 2)
  expect(files().sort()).toEqual(kept.map(({ fieldId }) => `${fieldId ?? ''}.field`).sort())
})

it('the disk budget is kept to, though the newest stays', async () => {
  const { fetchRun, look, files } = await startSources({ keepRuns: 9, diskBudgetMB: 0.3 })
  const [{ bytes }] = (await look()).kept
  expect(bytes).toBeGreaterThan(0.15e6)
  await fetchRun(2090)
  await until(async () => (await look()).kept.length === 1)
  expect((await look()).kept[0].run).toBe('2090-06-01T00:00:00.000Z')
  await until(() => files().length === 1)
})

it('a bad run replaces nothing, says why, and an older one is not fetched', async () => {
  const { fetchRun, look, files, cutAt, http } = await startSources()
  const good = (await look()).kept
  cutAt(60_000)
  const after = await fetchRun(2090)
  expect(after.lastFetch).toMatchObject({ state: 'failed', fieldId: null })
  expect(after.lastFetch?.complaint).toContain('ends inside the message')
  expect(after.kept).toEqual(good)
  expect(files()).toHaveLength(1)
  cutAt(Infinity)
  expect((await fetchRun(2090)).lastFetch?.state).toBe('stored')
  await http.post('/v1/sources/mirror/fetch?run=2011-01-10T12:00:00Z').expect(409)
})

it('a watched flight is flown again in each forecast that covers it, and outlives it', async () => {
  const { fetchRun, http, look, files } = await startSources({ keepRuns: 1 })
  // Released when the one time of the forecast is, 120 h after its run; a landing later is outside.
  const post = async (time: string) => {
    const launch = { ...flightRequest().launch, time }
    const answer = await http.post('/v1/flights').send(flightRequest({ launch })).expect(201)
    const { id } = (answer.body as { flight: { id: string } }).flight
    await http.put(`/v1/flights/${id}/watch`).send({ tellBeyondM: 1 }).expect(200)
    return id
  }
  const id = await post('2090-06-06T00:00:00Z')
  await fetchRun(2090)
  await until(async () => (await look()).kept.length === 1)
  const runs = (await http.get(`/v1/flights/${id}/runs`)).body as { items: Run[] }
  // The forecast ends as the balloon leaves: it does not cover the flight, and that is no failure.
  expect(runs.items.map(({ air }) => air.kind)).toEqual(['standard'])
  const events = await http.get(`/v1/flights/${id}/events`).set('accept', 'application/json')
  expect((events.body as { items: unknown[] }).items).toHaveLength(1)
  // A run made by hand with the air held stands when its forecast is dropped.
  const air = { kind: 'field', id: (await look()).kept[0].fieldId, outside: 'hold' }
  const made = await http.post(`/v1/flights/${id}/runs`).send({ air }).expect(201)
  await fetchRun(2091)
  await until(async () => (await look()).kept.length === 1)
  await until(() => files().length === 1)
  const { id: runId } = made.body as Run
  expect((await http.get(`/v1/runs/${runId}`).expect(200)).body).toEqual(made.body)
})
