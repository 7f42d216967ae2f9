import { expect, test } from 'vitest'
import { profileAnswerSchema, type ProfileAnswer } from '../../src/service/schemas/profile.ts'
import { fixture, postFlight, postProfile, startService, steadyWind } from './harness.ts'

test('a real CSV sounding is read, listed and answered level by level', async () => {
  const service = await startService()
  const profile = await postProfile(service)
  profileAnswerSchema.parse(profile)
  expect(profile).toMatchObject({
    validAt: '2023-05-22T11:04:00.000Z',
    latitudeDeg: 35.18,
    longitudeDeg: -97.44,
    temperature: { levels: 256, lowestAltitudeM: 345 },
    wind: { levels: 255 },
  })
  const { http } = service
  expect((await http.get(`/v1/profiles/${profile.id}`)).body).toEqual(profile)
  expect((await http.get('/v1/profiles')).body).toEqual({ items: [profile], nextCursor: null })
  const answer = await http.get(`/v1/profiles/${profile.id}/levels`).expect(200)
  const { levels } = answer.body as { levels: object[] }
  // The second line of the file: 971.0 hPa, 397 m, 15.0 °C, from 145° at 5.2 m/s.
  expect(levels[1]).toMatchObject({
    pressureHPa: 971,
    geopotentialHeightM: 397,
    temperatureK: 288.15,
    windFromDeg: 145,
    windSpeedMs: 5.2,
  })
})

test('a sounding that tells its times shows the ascent that it was', async () => {
  const service = await startService()
  const barrow = await postProfile(service, 'igra2-point-barrow-2010-06-01.txt')
  profileAnswerSchema.parse(barrow)
  // The file itself: released at 10 m, 31 966 gpm after 107 min 18 s; it tells no displacement.
  expect(barrow.observedAscent).toMatchObject({ durationS: 6438, meanRateMs: 4.988, drift: null })
  const norman = await postProfile(service)
  expect(norman.observedAscent).toBeNull()

  // The same real ascent as a BUFR message with displacements.
  const answer = await service.http
    .post('/v1/profiles')
    .set('content-type', 'application/bufr')
    .send(fixture('barrow-309052.bufr'))
    .expect(201)
  const [profile] = (answer.body as { profiles: ProfileAnswer[] }).profiles
  expect(profile.observedAscent?.durationS).toBeGreaterThan(3000)
  expect(profile.observedAscent?.drift?.distanceM).toBeGreaterThan(1000)
  expect((await service.http.get(`/v1/profiles/${profile.id}`)).body).toEqual(profile)
})

test('an IGRA file of many soundings makes as many profiles', async () => {
  const { http } = await startService()
  const one = fixture('igra2-point-barrow-2010-06-01.txt').toString().trimEnd()
  const next = one.replace('2010 06 01 00 2303', '2010 06 01 12 1105')
  const answer = await http
    .post('/v1/profiles')
    .set('content-type', 'text/plain')
    .send(`${one}\n${next}\n`)
    .expect(201)
  const { profiles } = answer.body as { profiles: { validAt: string }[] }
  expect(profiles.map(({ validAt }) => validAt)).toEqual([
    '2010-05-31T23:03:00.000Z',
    '2010-06-01T11:05:00.000Z',
  ])
  expect(answer.headers.location).toBeUndefined()
  const later = await http.get('/v1/profiles?validFrom=2010-06-01T00:00:00Z')
  expect((later.body as { items: object[] }).items).toEqual([profiles[1]])
})

test('name and time of the query take the place of the content’s', async () => {
  const { http } = await startService()
  const answer = await http
    .post('/v1/profiles?name=Morning&validAt=2023-05-22T12:00:00%2B01:00&format=csv')
    .set('content-type', 'application/octet-stream')
    .send(fixture('sounding-norman-2023-05-22.csv'))
    .expect(201)
  const [profile] = (answer.body as { profiles: object[] }).profiles
  expect(profile).toMatchObject({ name: 'Morning', validAt: '2023-05-22T11:00:00.000Z' })
})

test('while a large upload is read, others are answered', async () => {
  const { http } = await startService()
  const message = fixture('barrow-309052.bufr')
  const many = Buffer.concat(Array.from({ length: 600 }, () => message)) // some 0.4 MB
  let reading = true
  const upload = http
    .post('/v1/profiles')
    .set('content-type', 'application/bufr')
    .send(many)
    .expect(201)
    .then((answer) => {
      reading = false
      return (answer.body as { profiles: ProfileAnswer[] }).profiles
    })
  let answered = 0
  while (reading) {
    await http.get('/health').expect(200)
    answered++
  }
  expect(await upload).toHaveLength(600)
  expect(answered).toBeGreaterThan(3)
  const junk = Buffer.concat([Buffer.from('BUFR'), Buffer.alloc(400_000, 1)])
  await http.post('/v1/profiles').set('content-type', 'application/bufr').send(junk).expect(400)
})

test('a sounding in use stays, an unused one can go', async () => {
  const service = await startService()
  const { id } = await postProfile(service)
  const { flight } = await postFlight(service, { air: { kind: 'profile', id } })
  await service.http
    .delete(`/v1/profiles/${id}`)
    .expect(409)
    .expect(/1 runs/)
  await service.http.delete(`/v1/flights/${flight.id}`).expect(204)
  await service.http.delete(`/v1/profiles/${id}`).expect(204)
  await service.http.get(`/v1/profiles/${id}`).expect(404)
  await service.http.get(`/v1/profiles/${id}/levels`).expect(404)
})

test('what a prediction leans on beyond its sounding is said with the heights', async () => {
  const service = await startService()
  const levels = [500, 1000, 20_000].map((altitudeM, i) => ({
    altitudeM,
    ...(i === 0 ? { pressureHPa: 950 } : {}),
    temperatureK: [285, 282, 217][i],
    windFromDeg: 270,
    windSpeedMs: 10,
  }))
  const upload = await service.http
    .post('/v1/profiles')
    .send(steadyWind(0, 1, { levels, validAt: '2026-12-03T00:00:00Z', latitudeDeg: 50 }))
  const [{ id }] = (upload.body as { profiles: { id: string }[] }).profiles
  const { run } = await postFlight(service, { air: { kind: 'profile', id } })
  const codes = Object.fromEntries(run.cautions.map((caution) => [caution.code, caution]))
  const top = run.burst.altitudeM
  for (const code of ['temperature-continued', 'wind-held']) {
    expect(codes[code].fromAltitudeM).toBeCloseTo(20_000, 0)
    expect(codes[code].toAltitudeM).toBeCloseTo(top, 0)
  }
  expect(codes['below-sounding']).toMatchObject({ fromAltitudeM: 450, toAltitudeM: 500 })
  expect(codes['air-of-another-time'].message).toContain('57 h before')
  expect(codes['air-of-another-place'].message).toMatch(/32\d km/)
  expect(codes).not.toHaveProperty('still-air')
})

test('a sounding of wind alone flies in the standard atmosphere and says so', async () => {
  const service = await startService()
  const upload = await service.http.post('/v1/profiles').send(steadyWind(270, 10))
  const [{ id }] = (upload.body as { profiles: { id: string }[] }).profiles
  const { run } = await postFlight(service, { air: { kind: 'profile', id } })
  const still = await postFlight(service)
  expect(run.burst.altitudeM).toBe(still.run.burst.altitudeM)
  expect(run.cautions.map(({ code }) => code)).toContain('standard-temperatures')
})
