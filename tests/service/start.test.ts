import { spawnSync } from 'node:child_process'
import { once } from 'node:events'
import { mkdtempSync } from 'node:fs'
import { connect } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { expect, test } from 'vitest'
import { end, startServer } from './startedServer.ts'

const MAIN = new URL('../../dist/main.js', import.meta.url).pathname
const freshFile = () => join(mkdtempSync(join(tmpdir(), 'driftbook-start-')), 'a.sqlite')

test('an empty database gets one invented flight, printed as a short table', async () => {
  const DATABASE_FILE = freshFile()
  const first = await startServer({ DATABASE_FILE })
  const printed = first.printed.join('\n')
  expect(printed).toMatch(/invented/)
  expect(printed).toMatch(/burst +\d{5} m at \d\d:\d\d UTC/)
  expect(printed).toMatch(/landing +\d+\.\d{4}°, \d+\.\d{4}° at/)
  expect(printed).toMatch(/local regulation/)
  await end(first, 'SIGTERM')

  // It is not added a second time.
  const second = await startServer({ DATABASE_FILE })
  expect(second.printed).toHaveLength(1)
  const answer = await fetch(`${second.address}/v1/flights`)
  const { items } = (await answer.json()) as { items: { title: string }[] }
  expect(items.map(({ title }) => title)).toEqual([expect.stringMatching(/^Invented demo/)])
  await end(second, 'SIGTERM')
})

test('DEMO=off leaves the database empty', async () => {
  const server = await startServer({ DATABASE_FILE: freshFile(), DEMO: 'off' })
  expect(server.printed).toHaveLength(1)
  expect(await (await fetch(`${server.address}/health`)).json()).toMatchObject({ flights: 0 })
  await end(server, 'SIGINT')
  expect(server.process.exitCode).toBe(0)
})

test('a connection that never asks anything does not keep the program from stopping', async () => {
  const server = await startServer({ DATABASE_FILE: freshFile(), DEMO: 'off' })
  const silent = connect(Number(new URL(server.address).port), '127.0.0.1')
  await once(silent, 'connect')
  const start = performance.now()
  await end(server, 'SIGTERM')
  silent.destroy()
  expect(server.process.exitCode).toBe(0)
  expect(performance.now() - start).toBeLessThan(15_000) // it was the minute of a header's time-out
})

test('a malformed variable is refused by name', () => {
  const { status, stderr } = spawnSync(process.execPath, [MAIN], {
    env: { ...process.env, PORT: 'eighty' },
    encoding: 'utf8',
  })
  expect(status).toBe(1)
  expect(stderr).toMatch(/PORT="eighty"/)
})
