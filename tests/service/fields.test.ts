import { mkdtempSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs'
import { request as httpRequest } from 'node:http'
import { type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { parse } from 'csv-parse/sync'
import { expect, onTestFinished, test } from 'vitest'
import { type FieldAnswer, type ColumnLevel } from '../../src/service/schemas/field.ts'
import { type Run } from '../../src/service/schemas/run.ts'
import { flightRequest, postFlight, startService, type Service } from './harness.ts'

/** All 26 levels over a region at two times; see tests/fixtures/fields/README.md. */
const region = fixtureBytes('gfs-region')

/** In the region, in the first hour of the forecast. */
const launch = {
  latitudeDeg: 35.18,
  longitudeDeg: -97.44,
  altitudeM: 345,
  time: '2011-01-15T12:10:00Z',
}

function fixtureBytes(name: string): Buffer {
  return readFileSync(new URL(`../fixtures/fields/${name}.grib2`, import.meta.url))
}

function folder(): string {
  const path = mkdtempSync(join(tmpdir(), 'driftbook-fields-'))
  onTestFinished(() => {
    rmSync(path, { recursive: true })
  })
  return path
}

function post({ http }: Service, bytes: Buffer, type = 'application/grib') {
  return http.post('/v1/fields').set('content-type', type).send(bytes)
}

async function postField(service: Service, bytes = region): Promise<FieldAnswer> {
  return (await post(service, bytes).expect(201)).body as FieldAnswer
}

function inField(id: string, changes: object = {}) {
  return { launch, air: { kind: 'field', id }, ...changes }
}

/** The answer of a calculation, also where it became a job on a busy machine. */
async function worked({ http }: Service, path: string, body: object): Promise<unknown> {
  const answer = await http.post(path).send(body)
  if (answer.status === 200) return answer.body
  expect(answer.status).toBe(202)
  const { id } = answer.body as { id: string }
  const later = () => http.get(`/v1/jobs/${id}/answer`)
  await expect.poll(async () => (await later()).status, { timeout: 20_000 }).toBe(200)
  return (await later()).body
}

test('an uploaded forecast tells what it holds, is listed, and is deleted with its file', async () => {
  const fieldDirectory = folder()
  const service = await startService({ fieldDirectory })
  const { http } = service
  const answer = await post(service, region, 'application/octet-stream').expect(201)
  const field = answer.body as FieldAnswer
  // What the messages say: run of 2011-01-10 12 UTC, 120 h ahead and 3 h more, NCEP (7 in C-11).
  expect(field).toMatchObject({
    centre: 7,
    referenceTime: '2011-01-10T12:00:00.000Z',
    validTimes: ['2011-01-15T12:00:00.000Z', '2011-01-15T15:00:00.000Z'],
    grid: { columns: 13, rows: 9, wraps: false },
    skipped: [],
  })
  expect(field.levelsHPa).toHaveLength(26)
  expect(field.levelsHPa.slice(0, 2)).toEqual([1000, 975])
  expect(field.levelsHPa.at(-1)).toBe(10)
  expect(field.heights.highestGeopotentialHeightM).toBeGreaterThan(29_000)
  expect(answer.headers.location).toBe(`/v1/fields/${field.id}`)
  expect((await http.get(`/v1/fields/${field.id}`).expect(200)).body).toEqual(field)
  const second = await postField(service)
  const page = await http.get('/v1/fields?limit=1').expect(200)
  const { items, nextCursor } = page.body as { items: FieldAnswer[]; nextCursor: string }
  expect(items.map(({ id }) => id)).toEqual([second.id])
  const rest = await http.get(`/v1/fields?cursor=${nextCursor}`).expect(200)
  expect((rest.body as { items: unknown[] }).items).toEqual([field])
  await http.delete(`/v1/fields/${field.id}`).expect(204)
  await http.get(`/v1/fields/${field.id}`).expect(404)
  await http.delete(`/v1/fields/${field.id}`).expect(404)
  expect(readdirSync(fieldDirectory)).toEqual([`${second.id}.field`])
})

test('a column has the values of the reference decoder at a grid point, as JSON and CSV', async () => {
  const service = await startService()
  const { http } = service
  const field = await postField(service, fixtureBytes('gfs-500-250hPa'))
  const query = 'latitudeDeg=40&longitudeDeg=-90&time=2011-01-15T12:00:00Z'
  const url = `/v1/fields/${field.id}/column?${query}`
  const { levels } = (await http.get(url).expect(200)).body as { levels: ColumnLevel[] }
  expect(levels.map(({ pressureHPa }) => pressureHPa)).toEqual([500, 250])
  // ecCodes 2.28.0, grib_get -l 40,-90,1 of the fixture: gh, t, r, u, v at the grid point 40 N 270 E.
  const expected = [
    { gh: 5544.48, t: 253.7, r: 72.0, u: 27.16, v: -15.39 },
    { gh: 10333.98, t: 219.1, r: 85.0, u: 24.1, v: -35.4 },
  ]
  levels.forEach((level, i) => {
    const { gh, t, r, u, v } = expected[i]
    expect(level.geopotentialHeightM).toBeCloseTo(gh, 1)
    expect(level.temperatureK).toBeCloseTo(t, 2)
    expect(level.relativeHumidityPercent).toBeCloseTo(r, 1)
    expect(level.u).toBeCloseTo(u, 2)
    expect(level.v).toBeCloseTo(v, 2)
    expect(level.windSpeedMs).toBeCloseTo(Math.hypot(u, v), 2)
    const from = ((Math.atan2(-u, -v) * 180) / Math.PI + 360) % 360
    expect(level.windFromDeg).toBeCloseTo(from, 0)
  })
  const csv = await http.get(url).set('accept', 'text/csv').expect(200)
  expect(csv.headers['content-type']).toContain('text/csv')
  const rows = parse(csv.text, {
    columns: true,
    cast: (value, { header }) => (header ? value : Number(value)),
  }) as unknown
  expect(rows).toEqual(levels)
  expect((await http.get(`${url}&format=csv`).expect(200)).text).toBe(csv.text)
  const late = url.replace('T12:00:00Z', 'T12:00:01Z')
  expect((await http.get(late).expect(422)).body).toMatchObject({
    errors: [
      { path: '?time', message: expect.stringContaining('2011-01-15T12:00:00.000Z') as string },
    ],
  })
  await http.get(url.replace('latitudeDeg=40', 'latitudeDeg=91')).expect(400)
})

test('flights, trials, new runs, reruns and notices take a forecast, and it is kept with them', async () => {
  const service = await startService()
  const { http } = service
  const { id, name } = await postField(service)
  const { flight, run } = await postFlight(service, inField(id))
  expect(run.air).toEqual({
    kind: 'field',
    id,
    name,
    validAt: '2011-01-15T12:10:00.000Z',
    referenceTime: '2011-01-10T12:00:00.000Z',
  })
  expect(run.landing.distanceM).toBeGreaterThan(10_000)
  const codes = run.cautions.map(({ code }) => code)
  expect(codes).toContain('far-ahead-forecast')
  expect(codes).not.toContain('beyond-forecast-grid')
  expect(codes).not.toContain('beyond-forecast-times')
  const trial = await http
    .post('/v1/trials')
    .send(flightRequest(inField(id)))
    .expect(200)
  expect((trial.body as Run).landing).toEqual(run.landing)
  const still = await postFlight(service, { launch })
  const again = await http
    .post(`/v1/flights/${still.flight.id}/runs`)
    .send({ air: { kind: 'field', id } })
    .expect(201)
  expect((again.body as Run).landing).toEqual(run.landing)
  await http
    .post('/v1/reruns')
    .send({ air: { kind: 'field', id, outside: 'hold' }, flightIds: [flight.id, still.flight.id] })
    .expect(201)
  const notice = await http.get(`/v1/runs/${run.id}/notice?altitudesM=10000`).expect(200)
  expect(notice.body).toMatchObject({ crossings: [{ way: 'up' }, { way: 'down' }] })
  const refused = await http.delete(`/v1/fields/${id}`).expect(409)
  expect((refused.body as { detail: string }).detail).toContain('4 runs')
  await http.delete(`/v1/flights/${flight.id}`).expect(204)
  await http.delete(`/v1/flights/${still.flight.id}`).expect(204)
  await http.delete(`/v1/fields/${id}`).expect(204)
  const gone = await http
    .post('/v1/trials')
    .send(flightRequest(inField(id)))
    .expect(422)
  expect(gone.body).toMatchObject({ errors: [{ path: '/air/id' }] })
})

test('beyond times and grid a flight is refused with the span that would work, or held with a caution', async () => {
  const service = await startService()
  const { http } = service
  const { id } = await postField(service)
  const fly = (place: object, outside?: string) =>
    http.post('/v1/trials').send(
      flightRequest({
        launch: { ...launch, ...place },
        air: { kind: 'field', id, ...(outside ? { outside } : {}) },
      }),
    )
  const cases = [
    [{ time: '2011-01-15T14:30:00Z' }, 'beyond-forecast-times', '2011-01-15T15:00:00.000Z'],
    [{ latitudeDeg: 40, longitudeDeg: -75.1 }, 'beyond-forecast-grid', 'corners'],
  ] as const
  for (const [place, code, says] of cases) {
    const refused = await fly(place).expect(422)
    expect(refused.body).toMatchObject({
      errors: [{ path: '/air', message: expect.stringContaining(says) as string }],
    })
    const held = await fly(place, 'hold').expect(200)
    expect((held.body as Run).cautions.map((caution) => caution.code)).toContain(code)
  }
  await fly({}, 'guess').expect(400)
})

test('a fill, a dispersion and windows agree with the flight in the forecast', async () => {
  const service = await startService()
  const { http } = service
  const { id } = await postField(service)
  const { neckLiftG: _none, ...unfilled } = flightRequest(inField(id))
  const fill = await http
    .post('/v1/fills')
    .send({ ...unfilled, target: { meanRateMs: 5.5 } })
    .expect(200)
  const filled = fill.body as { ascent: { meanRateMs: number } }
  expect(filled.ascent.meanRateMs).toBeCloseTo(5.5, 2)

  const plan = flightRequest(inField(id))
  const trial = (await http.post('/v1/trials').send(plan).expect(200)).body as Run
  const none = {
    neckLiftG: 0,
    balloonMassG: 0,
    burstDiameterShare: 0,
    dragShare: 0,
    dragAreaShare: 0,
    shareLeftOnLine: 0,
    releaseTimeS: 0,
    windMs: 0,
  }
  const spread = (await worked(service, '/v1/trials/dispersion', {
    plan,
    members: 100,
    spread: none,
  })) as {
    landing: { latitudeDeg: number; longitudeDeg: number }
    cautions: { code: string }[]
  }
  // Members that differ in nothing land where the flight does: 1e-3° is some 100 m.
  expect(spread.landing.latitudeDeg).toBeCloseTo(trial.landing.latitudeDeg, 3)
  expect(spread.landing.longitudeDeg).toBeCloseTo(trial.landing.longitudeDeg, 3)
  expect(spread.cautions.map(({ code }) => code)).toContain('members-along-flight')

  const { times } = (await worked(service, '/v1/windows', {
    plan,
    from: launch.time,
    to: '2011-01-15T16:10:00Z',
    stepMinutes: 240,
  })) as {
    times: { notFlyable: string | null; figures: { landing: Run['landing'] } | null }[]
  }
  expect(times[0].figures?.landing.longitudeDeg).toBeCloseTo(trial.landing.longitudeDeg, 3)
  expect(times[1].figures).toBeNull()
  expect(times[1].notFlyable).toContain('2011-01-15T15:00:00.000Z')
})

test('a truncated, hostile, empty or too long upload is a 4xx that leaves nothing', async () => {
  const fieldDirectory = folder()
  const service = await startService({ fieldDirectory, fieldUploadLimit: 200_000 })
  const swelled = Buffer.from(region)
  swelled.writeUInt32BE(2 ** 31, 8) // a message of 2^63 bytes
  const cases: [Buffer, number][] = [
    [region.subarray(0, region.length - 100), 400],
    [Buffer.from('not a forecast at all'), 400],
    [Buffer.alloc(150_000), 400],
    [swelled, 413],
    [Buffer.concat([region, region, region]), 413],
    [fixtureBytes('scanning'), 422],
  ]
  for (const [bytes, status] of cases) {
    const answer = await post(service, bytes)
    expect(answer.status).toBe(status)
    expect(answer.headers['content-type']).toContain('application/problem+json')
  }
  await service.http.post('/v1/fields').set('content-type', 'application/grib').expect(400)
  await post(service, region, 'text/csv').expect(415)
  expect(readdirSync(fieldDirectory)).toEqual([])
  expect((await service.http.get('/v1/fields')).body).toMatchObject({ items: [] })
})

test('an upload that breaks off leaves nothing', async () => {
  const fieldDirectory = folder()
  const service = await startService({ fieldDirectory })
  const { port } = service.app.server.address() as AddressInfo
  await new Promise<void>((resolve) => {
    const upload = httpRequest({
      port,
      host: '127.0.0.1',
      method: 'POST',
      path: '/v1/fields',
      headers: { 'content-type': 'application/grib', 'content-length': region.length },
    })
    upload.on('error', () => {
      resolve()
    })
    upload.write(region.subarray(0, 50_000), () => setTimeout(() => upload.destroy(), 200))
  })
  await expect.poll(() => readdirSync(fieldDirectory), { timeout: 5000 }).toEqual([])
})

test('the same Idempotency-Key gives the first forecast again, and refuses another', async () => {
  const fieldDirectory = folder()
  const service = await startService({ fieldDirectory })
  const send = (bytes: Buffer) => post(service, bytes).set('idempotency-key', 'k')
  const first = await send(region).expect(201)
  expect((await send(region).expect(201)).body).toEqual(first.body)
  await send(fixtureBytes('gfs-500-250hPa')).expect(409)
  expect(readdirSync(fieldDirectory)).toEqual([`${(first.body as FieldAnswer).id}.field`])
})

test('what an ended program left half done is removed at the start; fields stay', async () => {
  const fieldDirectory = folder()
  for (const name of ['a.upload.part', 'b.decoded.part', 'c.decoded.part.part', 'd.field']) {
    writeFileSync(join(fieldDirectory, name), 'x')
  }
  await startService({ fieldDirectory })
  expect(readdirSync(fieldDirectory)).toEqual(['d.field'])
})
