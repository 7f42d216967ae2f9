import { spawn, type ChildProcess } from 'node:child_process'
import { createInterface } from 'node:readline'
import { Column } from '../../src/physics/column.ts'
import { fly } from '../../src/physics/flight.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { flyMembers } from '../../src/planning/dispersion.ts'
import { geodesicLine } from '../../src/planning/geodesic.ts'
import { MEMBER_VALUES, MemberFlights } from '../../src/planning/memberFlights.ts'
import { defaultSpread } from '../../src/planning/spread.ts'
import { readSoundings } from '../../src/soundings/readSoundings.ts'
import { standardFlight } from '../physics/plans.ts'
import { referenceFlight } from '../physics/referenceFlight.ts'
import { fixture, flightRequest } from '../service/harness.ts'

const SERVER = new URL('planningServer.ts', import.meta.url).pathname
const ROUNDS = 5
const FLIGHTS = 10_000

/** Flights and members a second on one core beside a general solver of the same equations to 10 m. */
export function benchMembers(): void {
  console.log('One column of a real sounding of 256 levels, one core, landing within 10 m')
  const [norman] = readSoundings(fixture('sounding-norman-2023-05-22.csv'), {})
  const air = new ProfileAir(norman.levels)
  const column = new Column(air)
  const plan = standardFlight()
  const exact = referenceFlight(plan, air).landing

  report('whole flights', FLIGHTS, () => {
    for (let i = 0; i < FLIGHTS; i++) fly(plan, column)
  })
  const flights = new MemberFlights(plan, column, defaultSpread(plan, null), 1)
  const rows = new Float64Array(FLIGHTS * MEMBER_VALUES)
  report('members, inputs strewn', FLIGHTS, () => {
    flyMembers(flights, 0, FLIGHTS, rows)
  })
  const tolerance = [1e-2, 1e-3, 1e-4, 1e-5, 1e-6, 1e-7, 1e-8].find((one) => {
    try {
      return geodesicLine(exact, referenceFlight(plan, air, one).landing).distance < 10
    } catch {
      return false // the solver gives up where it is asked for too little
    }
  })
  report(`odex, tolerance ${tolerance}`, 20, () => {
    for (let i = 0; i < 20; i++) referenceFlight(plan, air, tolerance)
  })
  const off = geodesicLine(exact, fly(plan, column).landing).distance
  console.log(`  a whole flight lands ${off.toFixed(2)} m from odex at a tolerance of 1e-10\n`)
}

function report(name: string, count: number, work: () => void): void {
  const rates = Array.from({ length: ROUNDS }, () => {
    const start = performance.now()
    work()
    return (count / (performance.now() - start)) * 1000
  })
  console.log(`  ${name.padEnd(28)} ${Math.round(median(rates)).toLocaleString('en')}/s`)
}

/** Dispersions over HTTP, and how single predictions fare beside a large one. */
export async function benchDispersion(): Promise<void> {
  console.log('POST /v1/trials/dispersion over HTTP')
  const { address, process: server } = await startServer()
  const post = async (path: string, body: object) => {
    const start = performance.now()
    const response = await fetch(address + path, {
      method: 'POST',
      headers: { 'content-type': 'application/json' },
      body: JSON.stringify(body),
    })
    await response.text()
    return { status: response.status, took: performance.now() - start }
  }
  for (const [members, rounds] of [
    [1000, 40],
    [20_000, 5],
  ] as const) {
    const body = { plan: flightRequest(), members }
    for (let i = 0; i < 5; i++) await post('/v1/trials/dispersion', body)
    const times: number[] = []
    for (let i = 0; i < rounds; i++) {
      const { status, took } = await post('/v1/trials/dispersion', body)
      if (status !== 200) throw new Error(`answered with ${status}`)
      times.push(took)
    }
    console.log(
      `  ${members} members`.padEnd(31) +
        `${median(times).toFixed(0)} ms, slowest of ${rounds} ${Math.max(...times).toFixed(0)} ms`,
    )
  }
  await fetch(`${address}/loop`)
  let busy = true
  const large = post('/v1/trials/dispersion', { plan: flightRequest(), members: 100_000 }).then(
    () => (busy = false),
  )
  const singles: number[] = []
  while (busy) singles.push((await post('/v1/trials', flightRequest())).took)
  await large
  const loop = (await (await fetch(`${address}/loop`)).json()) as { max: number; p99: number }
  console.log(
    `  single predictions beside 100 000 members: ${median(singles).toFixed(1)} ms, slowest of ${singles.length} ${Math.max(...singles).toFixed(0)} ms`,
  )
  console.log(
    `  event loop late by ${loop.p99.toFixed(1)} ms at the 99th percentile, ${loop.max.toFixed(1)} ms at most\n`,
  )
  server.kill()
}

function median(values: readonly number[]): number {
  return values.toSorted((a, b) => a - b)[Math.floor(values.length / 2)]
}

async function startServer(): Promise<{ address: string; process: ChildProcess }> {
  const child = spawn(process.execPath, ['--import', 'tsx', SERVER], {
    stdio: ['ignore', 'pipe', 'inherit'],
  })
  for await (const address of createInterface(child.stdout)) return { address, process: child }
  throw new Error('the server did not start')
}
