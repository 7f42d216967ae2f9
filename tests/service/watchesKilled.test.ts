import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import Database from 'better-sqlite3'
import { expect, test } from 'vitest'
import { flightRequest, steadyWind } from './harness.ts'
import { end, startServer } from './startedServer.ts'
import { hoursFromRelease, until } from './watching.ts'

const FLIGHTS = 150

test('after kill -9 every watched flight is flown in the answered sounding, once', async () => {
  const DATABASE_FILE = join(mkdtempSync(join(tmpdir(), 'driftbook-killed-')), 'a.sqlite')
  const environment = { DATABASE_FILE, DEMO: 'off' }
  const first = await startServer(environment)
  const send = async (method: string, path: string, body: object) => {
    const answer = await fetch(first.address + path, {
      method,
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
    })
    expect(answer.ok).toBe(true)
    return answer.json()
  }
  const launch = { ...flightRequest().launch, time: hoursFromRelease(0) }
  for (let count = 0; count < FLIGHTS; count++) {
    const made = (await send('POST', '/v1/flights', flightRequest({ launch }))) as {
      flight: { id: string }
    }
    await send('PUT', `/v1/flights/${made.flight.id}/watch`, { tellBeyondM: 1000 })
  }
  await send('POST', '/v1/profiles', steadyWind(270, 10, { validAt: hoursFromRelease(-3) }))
  await end(first, 'SIGKILL')

  const database = new Database(DATABASE_FILE, { readonly: true })
  const count = (sql: string) => (database.prepare(sql).get() as { count: number }).count
  const due = count('SELECT count(*) AS count FROM due_reruns')
  expect(due).toBeGreaterThan(0) // else it was not killed in the midst
  expect(count('SELECT count(*) AS count FROM runs')).toBe(2 * FLIGHTS - due)
  const second = await startServer(environment)
  await until(() => count('SELECT count(*) AS count FROM due_reruns') === 0)
  await end(second, 'SIGTERM')
  expect(count('SELECT count(*) AS count FROM runs')).toBe(2 * FLIGHTS)
  expect(count("SELECT count(*) AS count FROM events WHERE kind = 'run-stored'")).toBe(2 * FLIGHTS)
  expect(count("SELECT count(*) AS count FROM events WHERE kind = 'landing-moved'")).toBe(FLIGHTS)
  database.close()
}, 60_000)
