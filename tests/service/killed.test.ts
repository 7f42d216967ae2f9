import { mkdtempSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { setTimeout } from 'node:timers/promises'
import Database from 'better-sqlite3'
import { expect, test } from 'vitest'
import { type Run } from '../../src/service/schemas/run.ts'
import { flightRequest } from './harness.ts'
import { end, startServer } from './startedServer.ts'

const KILLS = 20
const POSTERS = 4

/** Posts flights until the server is gone; adds every answered run to `acknowledged`. */
async function post(address: string, acknowledged: Map<string, string>): Promise<void> {
  for (let count = 0; ; count++) {
    try {
      const answer = await fetch(`${address}/v1/flights`, {
        method: 'POST',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify(flightRequest({ neckLiftG: 2000 + count })),
      })
      const { run } = (await answer.json()) as { run: Run }
      acknowledged.set(run.id, JSON.stringify(run))
    } catch {
      return
    }
  }
}

test(
  'every acknowledged run survives twenty kill -9 under load',
  { timeout: 240_000 },
  async () => {
    const DATABASE_FILE = join(mkdtempSync(join(tmpdir(), 'driftbook-killed-')), 'a.sqlite')
    const acknowledged = new Map<string, string>()
    for (let kill = 0; kill < KILLS; kill++) {
      const before = acknowledged.size
      const server = await startServer({ DATABASE_FILE, DEMO: 'off' })
      const posters = Array.from({ length: POSTERS }, () => post(server.address, acknowledged))
      while (acknowledged.size === before) await setTimeout(5)
      await setTimeout(Math.random() * 300)
      await end(server, 'SIGKILL')
      await Promise.all(posters)
    }

    const database = new Database(DATABASE_FILE)
    expect(database.pragma('integrity_check', { simple: true })).toBe('ok')
    expect(database.pragma('foreign_key_check')).toEqual([])
    const find = database.prepare<[string], { answer: string }>(
      `SELECT answer FROM runs JOIN flights ON flights.id = flight_id WHERE runs.id = ?`,
    )
    for (const [id, answer] of acknowledged) expect(find.get(id)?.answer).toBe(answer)
    database.close()
    expect(acknowledged.size).toBeGreaterThan(KILLS)
  },
)
