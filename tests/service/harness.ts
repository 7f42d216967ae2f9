import { mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { type FastifyInstance } from 'fastify'
import request from 'supertest'
import { onTestFinished } from 'vitest'
import { buildApp, type AppOptions } from '../../src/service/app.ts'
import { type Run } from '../../src/service/schemas/run.ts'
import { type Flight } from '../../src/service/schemas/flight.ts'
import { type ProfileAnswer } from '../../src/service/schemas/profile.ts'
import { Store } from '../../src/store/store.ts'

export const MIGRATIONS = new URL('../../migrations', import.meta.url).pathname

/** The real service on a real database file, gone when the test is. */
export interface Service {
  app: FastifyInstance
  store: Store
  /** supertest on the listening server */
  http: ReturnType<typeof request>
}

export async function startService(options: AppOptions = {}): Promise<Service> {
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-'))
  const store = new Store(join(folder, 'test.sqlite'), MIGRATIONS)
  const app = await buildApp(store, false, options)
  await app.listen({ host: '127.0.0.1', port: 0 })
  onTestFinished(async () => {
    await app.close()
    store.close()
    rmSync(folder, { recursive: true })
  })
  return { app, store, http: request(app.server) }
}

/** The request of the documentation, with changes. */
export function flightRequest(changes: object = {}) {
  return {
    title: 'Lake ozone 3',
    launch: {
      latitudeDeg: 47.05,
      longitudeDeg: 8.31,
      altitudeM: 450,
      time: '2026-12-05T09:00:00Z',
    },
    balloon: { massG: 1200, ratedBurstDiameterM: 8.6 },
    gas: { kind: 'helium' },
    neckLiftG: 2600,
    payload: { massG: 1500 },
    parachute: { dragAreaM2: 0.9 },
    ...changes,
  }
}

export function fixture(name: string): Buffer {
  return readFileSync(new URL(`../fixtures/${name}`, import.meta.url))
}

export async function postFlight({ http }: Service, changes: object = {}) {
  const answer = await http.post('/v1/flights').send(flightRequest(changes)).expect(201)
  return answer.body as { flight: Flight; run: Run }
}

/** Uploads a real sounding; `file` is one of the fixtures. */
export async function postProfile({ http }: Service, file = 'sounding-norman-2023-05-22.csv') {
  const answer = await http
    .post('/v1/profiles')
    .set('content-type', file.endsWith('.csv') ? 'text/csv' : 'text/plain')
    .send(fixture(file).toString())
    .expect(201)
  return (answer.body as { profiles: ProfileAnswer[] }).profiles[0]
}

/** A sounding of one wind at every height, in JSON. */
export function steadyWind(windFromDeg: number, windSpeedMs: number, more: object = {}) {
  return {
    name: `Invented steady wind from ${windFromDeg}°`,
    validAt: '2026-12-05T06:00:00Z',
    latitudeDeg: 47,
    longitudeDeg: 8,
    levels: [0, 40_000].map((altitudeM) => ({ altitudeM, windFromDeg, windSpeedMs })),
    ...more,
  }
}
