import { expect, test } from 'vitest'
import { flightSchema } from '../../src/service/schemas/flight.ts'
import { runSchema, trialSchema, type Trial } from '../../src/service/schemas/run.ts'
import { flightRequest, postFlight, postProfile, startService } from './harness.ts'

test('a posted flight is stored with its run and answered as documented', async () => {
  const service = await startService()
  const { http } = service
  const answer = await http.post('/v1/flights').send(flightRequest()).expect(201)
  const { flight, run } = answer.body as Awaited<ReturnType<typeof postFlight>>
  expect(answer.headers.location).toBe(`/v1/flights/${flight.id}`)
  expect(Object.keys(answer.body as object)).toEqual(['flight', 'run'])
  expect(Object.keys(run)).toEqual([
    'id',
    'flightId',
    'createdAt',
    'modelVersion',
    'air',
    'plan',
    'fill',
    'ascent',
    'burst',
    'descent',
    'landing',
    'cautions',
    'shift',
  ])
  flightSchema.parse(flight)
  runSchema.parse(run)

  // The defaults of the documentation.
  expect(run.plan).toEqual({
    launch: {
      latitudeDeg: 47.05,
      longitudeDeg: 8.31,
      altitudeM: 450,
      time: '2026-12-05T09:00:00Z',
    },
    balloon: { massG: 1200, ratedBurstDiameterM: 8.6, shareLeftOnLine: 0 },
    gas: { kind: 'helium', purity: 1, temperatureOffsetK: 0 },
    neckLiftG: 2600,
    payload: { massG: 1500 },
    parachute: { dragAreaM2: 0.9 },
    drag: { curve: 'sounding-balloon' },
    landingAltitudeM: 450,
    air: { kind: 'standard' },
  })
  expect(run.fill).toMatchObject({ grossLiftG: 3800, neckLiftG: 2600, freeLiftG: 1100 })
  expect(run.burst.diameterM).toBe(8.6)
  expect(run.shift).toBeNull()
  expect(run.landing).toMatchObject({ altitudeM: 450, distanceM: 0, bearingDeg: 0 })
  expect(Date.parse(run.landing.time) - Date.parse('2026-12-05T09:00:00Z')).toBeCloseTo(
    run.landing.elapsedS * 1000,
    -1,
  )
  expect(run.ascent.durationS + run.descent.durationS).toBeCloseTo(run.landing.elapsedS, 2)

  expect((await http.get(`/v1/flights/${flight.id}`).expect(200)).body).toEqual(flight)
  expect((await http.get(`/v1/runs/${run.id}`).expect(200)).body).toEqual(run)
})

test('every prediction says that airspace notification follows local regulation', async () => {
  const service = await startService()
  const { run } = await postFlight(service)
  const stored = await service.http.get(`/v1/runs/${run.id}`)
  const trial = await service.http.post('/v1/trials').send(flightRequest())
  for (const { cautions } of [run, stored.body as typeof run, trial.body as Trial]) {
    expect(cautions[0].code).toBe('airspace-notification')
    expect(cautions[0].message).toMatch(/follows local regulation.*competent authority/)
  }
})

test('a trial is the same run and stores nothing', async () => {
  const service = await startService()
  const profile = await postProfile(service)
  const changes = {
    launch: {
      latitudeDeg: 35.18,
      longitudeDeg: -97.44,
      altitudeM: 345,
      time: '2023-05-22T12:00:00Z',
    },
    air: { kind: 'profile', id: profile.id },
  }
  const trial = await service.http.post('/v1/trials').send(flightRequest(changes)).expect(200)
  trialSchema.parse(trial.body)
  expect(service.store.flights.count()).toBe(0)
  const { run } = await postFlight(service, changes)
  expect({ ...run, id: null, flightId: null, createdAt: '' }).toEqual({
    ...(trial.body as Trial),
    createdAt: '',
  })
  // The first figures of this flight, so that no change of the model goes unseen.
  expect(run.burst.altitudeM).toBeCloseTo(32_140.9, 0)
  expect(run.landing.distanceM / 1000).toBeCloseTo(58.9, 1)
})

test('a trial answers with its track where it is asked to, as the stored run has it', async () => {
  const service = await startService()
  const trial = await service.http.post('/v1/trials?track=true').send(flightRequest()).expect(200)
  const { track } = trialSchema.parse(trial.body)
  const { run } = await postFlight(service)
  const stored = await service.http.get(`/v1/runs/${run.id}/track`).expect(200)
  expect(track?.length).toBeGreaterThan(20)
  expect(track).toEqual((stored.body as { points: unknown }).points)
  await service.http.post('/v1/trials?track=perhaps').send(flightRequest()).expect(400)
})

test('the packages of the load and the strength of the line are kept with the plan', async () => {
  const service = await startService()
  const payload = {
    massG: 1500,
    packages: [
      { name: 'Ozone sonde', massG: 900, smallestFaceCm2: 180 },
      { name: 'Camera', massG: 250 },
    ],
    lineStrengthN: 150,
  }
  const { flight, run } = await postFlight(service, { payload })
  expect(flight.plan.payload).toEqual(payload)
  expect(run.plan.payload).toEqual(payload)
  const changed = await service.http
    .patch(`/v1/flights/${flight.id}`)
    .send({ payload: { lineStrengthN: 240 } })
    .expect(200)
  expect((changed.body as typeof flight).plan.payload).toEqual({ ...payload, lineStrengthN: 240 })
  const faulty = { ...payload, packages: [{ name: 'Ozone sonde', massG: -900 }] }
  const refused = await service.http
    .post('/v1/flights')
    .send(flightRequest({ payload: faulty }))
    .expect(400)
  expect((refused.body as { errors: { path: string }[] }).errors[0].path).toBe(
    '/payload/packages/0/massG',
  )
})

test('flights are listed newest first in pages, by release time and title', async () => {
  const service = await startService()
  const { http } = service
  const times = ['2026-12-01T06:00:00Z', '2026-12-02T06:00:00Z', '2026-12-03T06:00:00Z']
  const ids: string[] = []
  for (const [i, time] of times.entries()) {
    const launch = { ...flightRequest().launch, time }
    ids.unshift((await postFlight(service, { title: `Ozone ${i}`, launch })).flight.id)
  }
  const list = async (query: string) => {
    const answer = await http.get(`/v1/flights?${query}`).expect(200)
    return answer.body as { items: { id: string }[]; nextCursor: string | null }
  }
  const idsOf = ({ items }: { items: { id: string }[] }) => items.map(({ id }) => id)

  const first = await list('limit=2')
  expect(idsOf(first)).toEqual(ids.slice(0, 2))
  const second = await list(`limit=2&cursor=${String(first.nextCursor)}`)
  expect(idsOf(second)).toEqual(ids.slice(2))
  expect(second.nextCursor).toBeNull()

  const span = 'launchFrom=2026-12-02T06:00:00Z&launchTo=2026-12-03T06:00:00Z'
  expect(idsOf(await list(span))).toEqual([ids[1]])
  expect(idsOf(await list('launchFrom=2026-12-02T08:00:00%2B02:00'))).toEqual(ids.slice(0, 2))
  expect(idsOf(await list('title=oZONE%202'))).toEqual([ids[0]])
  await http.get('/v1/flights?cursor=nonsense').expect(400)
})

test('a change is merged into the plan and the runs keep what they flew', async () => {
  const service = await startService()
  const { flight, run } = await postFlight(service)
  const url = `/v1/flights/${flight.id}`
  const changed = await service.http
    .patch(url)
    .send({
      title: 'Lake ozone 4',
      launch: { time: '2026-12-06T09:00:00Z' },
      gas: { temperatureOffsetK: 5 },
      parachute: { seaLevelDescentMs: 5 },
    })
    .expect(200)
  expect(changed.body).toMatchObject({
    title: 'Lake ozone 4',
    plan: {
      launch: { latitudeDeg: 47.05, time: '2026-12-06T09:00:00Z' },
      gas: { kind: 'helium', purity: 1, temperatureOffsetK: 5 },
      parachute: { seaLevelDescentMs: 5 },
    },
  })
  expect((changed.body as typeof flight).plan.parachute).not.toHaveProperty('dragAreaM2')
  expect((await service.http.get(`/v1/runs/${run.id}`)).body).toEqual(run)

  // The next run flies the new plan and says so.
  const next = await service.http.post(`${url}/runs`).send({ air: { kind: 'standard' } })
  expect(next.body).toMatchObject({ shift: { planChanged: true }, plan: { neckLiftG: 2600 } })
})

test('a change that cannot fly, or is none, changes nothing', async () => {
  const service = await startService()
  const { flight } = await postFlight(service)
  const url = `/v1/flights/${flight.id}`
  const refused = await service.http.patch(url).send({ neckLiftG: 1000 }).expect(422)
  expect((refused.body as { detail: string }).detail).toContain('1000 g')
  await service.http
    .patch(url)
    .send({ balloon: { massKg: 1 } })
    .expect(400)
  await service.http
    .patch(url)
    .send({ drag: { curve: 'constant' } })
    .expect(400)
  expect((await service.http.get(url)).body).toEqual(flight)
})

test('a deleted flight is gone with its runs', async () => {
  const service = await startService()
  const { flight, run } = await postFlight(service)
  await service.http.delete(`/v1/flights/${flight.id}`).expect(204)
  await service.http.get(`/v1/flights/${flight.id}`).expect(404)
  await service.http.get(`/v1/runs/${run.id}`).expect(404)
  await service.http.delete(`/v1/flights/${flight.id}`).expect(404)
})

test('what was observed is kept beside what was predicted', async () => {
  const service = await startService()
  const { flight, run } = await postFlight(service)
  const url = `/v1/flights/${flight.id}/outcome`
  await service.http.get(url).expect(404)
  const outcome = {
    burst: { altitudeM: 31_500 },
    landing: { time: '2026-12-05T11:30:00Z', latitudeDeg: 47.15, longitudeDeg: 8.31 },
    remarks: 'In a meadow',
  }
  const answer = await service.http.put(url).send(outcome).expect(200)
  const body = answer.body as { misses: Record<string, number>[] }
  expect(body).toMatchObject({ outcome, misses: [{ runId: run.id, landingBearingDeg: 0 }] })
  const [miss] = body.misses
  // 0.1° of latitude at 47° is 11 118 m (WGS 84 meridian arc).
  expect(Math.abs(miss.landingDistanceM - 11_118)).toBeLessThan(2)
  expect(miss.burstAltitudeM).toBeCloseTo(31_500 - run.burst.altitudeM, 3)
  expect(miss.burstTimeS).toBeNull()
  expect((await service.http.get(url)).body).toEqual(body)
  expect((await service.http.get(`/v1/flights/${flight.id}`)).body).toMatchObject({ outcome })
  await service.http.delete(url).expect(204)
  await service.http.get(url).expect(404)
})
