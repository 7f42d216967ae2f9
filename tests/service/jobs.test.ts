import { mkdtempSync, rmSync } from 'node:fs'
import { type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import request from 'supertest'
import { describe, expect, it, onTestFinished } from 'vitest'
import { buildApp } from '../../src/service/app.ts'
import { type DispersionAnswer } from '../../src/service/schemas/dispersion.ts'
import { type JobAnswer } from '../../src/service/schemas/job.ts'
import { Store } from '../../src/store/store.ts'
import { flightRequest, MIGRATIONS, startService, type Service } from './harness.ts'

/** More members than two seconds suffice for. */
const LONG = 500_000

async function startJob({ http }: Pick<Service, 'http'>, members = LONG): Promise<JobAnswer> {
  const answer = await http
    .post('/v1/trials/dispersion')
    .send({ plan: flightRequest(), members })
    .expect(202)
  const job = answer.body as JobAnswer
  expect(answer.headers.location).toBe(`/v1/jobs/${job.id}`)
  return job
}

/** The events of a job until the stream ends. */
async function eventsOf(
  { app }: Service,
  id: string,
): Promise<{ event: string; job: JobAnswer }[]> {
  const address = app.server.address() as AddressInfo
  const response = await fetch(`http://127.0.0.1:${address.port}/v1/jobs/${id}/events`)
  expect(response.headers.get('content-type')).toBe('text/event-stream; charset=utf-8')
  const text = await response.text()
  return text
    .trim()
    .split('\n\n')
    .map((block) => {
      const [, event, data] = /^event: (\w+)\ndata: (.*)$/.exec(block) ?? []
      return { event, job: JSON.parse(data) as JobAnswer }
    })
}

describe('work that takes longer than two seconds', () => {
  it('goes on as a job that tells its progress, ends, and keeps its answer', async () => {
    const service = await startService()
    const job = await startJob(service)
    expect(job).toMatchObject({ kind: 'dispersion', state: 'running', finishedAt: null })
    const early = await service.http.get(`/v1/jobs/${job.id}/answer`).expect(409)
    expect((early.body as { detail: string }).detail).toContain('running')

    const events = await eventsOf(service, job.id)
    expect(events.length).toBeGreaterThan(5)
    const shares = events.map((event) => event.job.progress)
    expect(shares).toEqual(shares.toSorted((a, b) => a - b))
    expect(events.at(-1)).toMatchObject({ event: 'done', job: { state: 'done', progress: 1 } })

    const ended = await service.http.get(`/v1/jobs/${job.id}`).expect(200)
    expect(ended.body).toEqual(events.at(-1)?.job)
    const answer = await service.http.get(`/v1/jobs/${job.id}/answer`).expect(200)
    const dispersion = answer.body as DispersionAnswer
    expect(dispersion.members).toBe(LONG)
    expect(dispersion.landing.points).toHaveLength(LONG - dispersion.notFlown)
    const list = await service.http.get('/v1/jobs').expect(200)
    expect((list.body as { items: JobAnswer[] }).items).toEqual([ended.body])
  }, 120_000)

  it('stops when it is cancelled, at once and once', async () => {
    const service = await startService()
    const { id } = await startJob(service)
    const watching = eventsOf(service, id)
    const start = performance.now()
    const answer = await service.http.post(`/v1/jobs/${id}/cancel`).expect(200)
    expect(performance.now() - start).toBeLessThan(1500)
    expect((answer.body as JobAnswer).state).toBe('cancelled')
    expect((await watching).at(-1)?.event).toBe('cancelled')
    await service.http.post(`/v1/jobs/${id}/cancel`).expect(409)
    await service.http.get(`/v1/jobs/${id}/answer`).expect(409)
  }, 60_000)

  it('stands as interrupted after a stop or a killed process, and can be repeated', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'driftbook-'))
    onTestFinished(() => {
      rmSync(folder, { recursive: true })
    })
    const file = join(folder, 'test.sqlite')

    const before = new Store(file, MIGRATIONS)
    const first = await buildApp(before, false)
    await first.listen({ host: '127.0.0.1', port: 0 })
    const { id } = await startJob({ http: request(first.server) })
    await first.close()
    expect(before.jobs.get(id)?.state).toBe('interrupted')
    // What a killed process leaves: a row that says running.
    const killed = '0190d0a0-0000-7000-8000-000000000001'
    const asked = before.jobs.request(id) ?? ''
    before.jobs.insert({
      id: killed,
      kind: 'dispersion',
      request: JSON.stringify({ ...(JSON.parse(asked) as object), members: 300 }),
      createdAt: '2026-12-01T00:00:00.000Z',
    })
    before.close()

    const after = new Store(file, MIGRATIONS)
    const second = await buildApp(after, false)
    await second.listen({ host: '127.0.0.1', port: 0 })
    onTestFinished(async () => {
      await second.close()
      after.close()
    })
    const http = request(second.server)
    for (const one of [id, killed]) {
      const stands = (await http.get(`/v1/jobs/${one}`).expect(200)).body as JobAnswer
      expect(stands).toMatchObject({ state: 'interrupted', problem: null })
      expect(stands.finishedAt).not.toBeNull()
    }
    const repeated = await http.post(`/v1/jobs/${killed}/repeat`).expect(200)
    expect((repeated.body as DispersionAnswer).members).toBe(300)
  }, 60_000)

  it('is not found under an id that is none', async () => {
    const { http } = await startService()
    const id = '0190d0a0-0000-7000-8000-000000000002'
    await http.get(`/v1/jobs/${id}`).expect(404)
    await http.get(`/v1/jobs/${id}/events`).expect(404)
    await http.post(`/v1/jobs/${id}/cancel`).expect(404)
    await http.post(`/v1/jobs/${id}/repeat`).expect(404)
  })
})
