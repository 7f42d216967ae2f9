/**
 * How long it takes to decode and store a forecast's pressure levels of height, temperature and wind,
 * beside the reference decoder (ecCodes' tools, which must be on the path) on the same messages; and a
 * flight in that field beside a flight in a profile.
 *
 *   tsx tests/bench/fieldsBench.ts <forecast, GRIB edition 2>     or FORECAST=<forecast>
 */
import { execFileSync, type ExecFileSyncOptions } from 'node:child_process'
import { createReadStream, mkdtempSync, rmSync, statSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { FieldAir } from '../../src/fields/fieldAir.ts'
import { FieldFile } from '../../src/fields/fieldFile.ts'
import { storeField } from '../../src/fields/fieldWriter.ts'
import { Column } from '../../src/physics/column.ts'
import { fly, flyAlongPath } from '../../src/physics/flight.ts'
import { ProfileAir } from '../../src/physics/profileAir.ts'
import { standardFlight } from '../physics/plans.ts'

const source = process.argv[2] ?? process.env.FORECAST
if (!source) throw new Error('give the path of a forecast in GRIB edition 2')

const folder = mkdtempSync(join(tmpdir(), 'fields-bench-'))
const messages = join(folder, 'messages.grib2')
const where = 'typeOfLevel=isobaricInhPa,shortName=gh/t/u/v'
execFileSync('grib_copy', ['-w', where, source, messages])
const count = execFileSync('grib_count', [messages]).toString().trim()
console.log(`${count} messages, ${statSync(messages).size} bytes`)

/** Seconds of one run. */
async function seconds(run: () => unknown): Promise<number> {
  const start = performance.now()
  await run()
  return (performance.now() - start) / 1000
}

async function several(name: string, runs: number, run: () => unknown): Promise<number> {
  const times: number[] = []
  for (let round = 0; round < runs; round++) times.push(await seconds(run))
  const [first] = times
  const median = times.sort((a, b) => a - b)[runs >> 1]
  console.log(
    `${name.padEnd(58)} first ${(first * 1000).toFixed(0)} ms, median ${(median * 1000).toFixed(0)} ms`,
  )
  return median
}

const field = join(folder, 'bench.field')
const quiet: ExecFileSyncOptions = { maxBuffer: 2 ** 30, stdio: ['ignore', 'pipe', 'inherit'] }
// grib_get with a statistic decodes every value and prints one line a message; grib_get_data prints all.
const statistics = await several(
  'reference: grib_get -p max,min,avg (its process with it)',
  7,
  () => execFileSync('grib_get', ['-p', 'max,min,avg', messages], quiet),
)
const printed = await several('reference: grib_get_data (its process with it)', 3, () =>
  execFileSync('grib_get_data', [messages], quiet),
)
const stored = await several('decode and store, synced to disk', 7, () =>
  storeField(createReadStream(messages, { highWaterMark: 2 ** 20 }), field),
)
console.log(
  `decode and store takes ${(stored / statistics).toFixed(2)} times grib_get's, ${(stored / printed).toFixed(2)} times grib_get_data's`,
)

const air = new FieldAir(new FieldFile(field), 'hold')
const plan = standardFlight({ altitude: 345, latitude: 35.18, longitude: -97.44 })
const { latitude, longitude, time } = plan.launch
const column = new Column(new ProfileAir(air.column(latitude, longitude, time)))
const flights = 2000
const microseconds: { profile: number[]; field: number[] } = { profile: [], field: [] }
for (let round = 0; round < 9; round++) {
  const profile = await seconds(() => {
    for (let flight = 0; flight < flights; flight++) fly(plan, column)
  })
  const along = await seconds(() => {
    for (let flight = 0; flight < flights; flight++) flyAlongPath(plan, air)
  })
  microseconds.profile.push((profile / flights) * 1e6)
  microseconds.field.push((along / flights) * 1e6)
}
const best = (times: number[]) => Math.min(...times)
console.log(
  `a flight in a profile ${best(microseconds.profile).toFixed(1)} µs, in a field ${best(microseconds.field).toFixed(1)} µs: ${(best(microseconds.field) / best(microseconds.profile)).toFixed(2)} times (best of 9)`,
)
rmSync(folder, { recursive: true })
