import { expect, test } from 'vitest'
import { fixture, flightRequest, postFlight, startService, steadyWind } from './harness.ts'

test('a repeated request with the same key gets the first answer and makes nothing new', async () => {
  const { http, store } = await startService()
  const post = (body: object) =>
    http.post('/v1/flights').set('idempotency-key', 'night-shift-1').send(body)
  const first = await post(flightRequest()).expect(201)
  const again = await post(flightRequest()).expect(201)
  expect(again.text).toBe(first.text)
  expect(again.headers.location).toBe(first.headers.location)
  expect(store.flights.count()).toBe(1)

  const other = await post(flightRequest({ neckLiftG: 2700 })).expect(409)
  expect(other.body).toMatchObject({ status: 409, title: 'Conflict' })
  expect(store.flights.count()).toBe(1)
})

test('a key of a refused request is free for the corrected one', async () => {
  const { http } = await startService()
  const post = (neckLiftG: number) =>
    http.post('/v1/flights').set('idempotency-key', 'k').send(flightRequest({ neckLiftG }))
  await post(1000).expect(422)
  await post(2600).expect(201)
})

test('a key belongs to one kind of request', async () => {
  const service = await startService()
  const { flight } = await postFlight(service)
  const air = { kind: 'standard' }
  const runs = `/v1/flights/${flight.id}/runs`
  await service.http.post(runs).set('idempotency-key', 'a').send({ air }).expect(201)
  await service.http.post(runs).set('idempotency-key', 'a').send({ air }).expect(201)
  await service.http.post('/v1/reruns').set('idempotency-key', 'a').send({ air }).expect(409)
  const { body } = (await service.http.get(`/v1/flights/${flight.id}`)) as { body: object }
  expect(body).toMatchObject({ runCount: 2 })
})

test('uploads and reruns honour the key too', async () => {
  const service = await startService()
  const { http } = service
  await postFlight(service)
  const upload = () => http.post('/v1/profiles').set('idempotency-key', 'u').send(steadyWind(90, 5))
  expect((await upload()).text).toBe((await upload()).text)
  const rerun = () =>
    http
      .post('/v1/reruns')
      .set('idempotency-key', 'r')
      .send({ air: { kind: 'standard' } })
  const [one, two] = await Promise.all([rerun(), rerun()])
  expect(two.text).toBe(one.text)
  const text = fixture('sounding-norman-2023-05-22.csv').toString()
  await http
    .post('/v1/profiles')
    .set('idempotency-key', 'u')
    .set('content-type', 'text/csv')
    .send(text)
    .expect(409)
})
