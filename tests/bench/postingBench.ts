import { spawn, type ChildProcess } from 'node:child_process'
import { createInterface } from 'node:readline'
import autocannon from 'autocannon'
import { type Run } from '../../src/service/schemas/run.ts'
import { fixture, flightRequest } from '../service/harness.ts'

const SERVER = new URL('postingServer.ts', import.meta.url).pathname
const CONNECTIONS = 8
const SECONDS = 4
const ROUNDS = 3

/** POST /v1/flights, everything included, beside a bare Fastify route that inserts the same bytes. */
export async function benchPosting(): Promise<void> {
  console.log(`POST /v1/flights over HTTP, ${CONNECTIONS} connections, every commit synced`)
  const whole = await startServer('whole')
  const upload = await fetch(`${whole.address}/v1/profiles`, {
    method: 'POST',
    headers: { 'content-type': 'text/csv' },
    body: fixture('sounding-norman-2023-05-22.csv').toString(),
  })
  const { profiles } = (await upload.json()) as { profiles: { id: string }[] }

  for (const [name, air] of [
    ['standard atmosphere', { kind: 'standard' }],
    ['real sounding, 256 levels', { kind: 'profile', id: profiles[0].id }],
  ] as const) {
    const body = JSON.stringify(flightRequest({ air }))
    const { answer, trackBytes } = await sample(whole.address, body)
    const bare = await startServer('bare', answer, String(trackBytes))
    const rates: [number, number][] = []
    for (let round = 0; round < ROUNDS; round++) {
      rates.push([await rate(bare.address, body), await rate(whole.address, body)])
    }
    const [bareRate, wholeRate] = rates.sort((a, b) => a[1] / a[0] - b[1] / b[0])[1]
    console.log(
      `  ${name.padEnd(28)} ${Math.round(wholeRate)}/s, bare route ${Math.round(bareRate)}/s: ${(wholeRate / bareRate).toFixed(2)} of it`,
    )
    bare.process.kill()
  }
  whole.process.kill()
  console.log()
}

async function sample(address: string, body: string) {
  const headers = { 'content-type': 'application/json' }
  const posted = await fetch(`${address}/v1/flights`, { method: 'POST', headers, body })
  const answer = await posted.text()
  const { run } = JSON.parse(answer) as { run: Run }
  const track = (await (await fetch(`${address}/v1/runs/${run.id}/track`)).json()) as {
    points: object[]
  }
  return { answer, trackBytes: track.points.length * 32 }
}

async function rate(address: string, body: string): Promise<number> {
  const result = await autocannon({
    url: `${address}/v1/flights`,
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body,
    connections: CONNECTIONS,
    duration: SECONDS,
  })
  if (result.non2xx > 0 || result.errors > 0) throw new Error('the server refused its load')
  return result.requests.average
}

async function startServer(...mode: string[]): Promise<{ address: string; process: ChildProcess }> {
  const child = spawn(process.execPath, ['--import', 'tsx', SERVER, ...mode], {
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  for await (const address of createInterface(child.stdout)) return { address, process: child }
  throw new Error('the server did not start')
}
