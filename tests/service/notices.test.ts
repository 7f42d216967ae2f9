import { expect, test } from 'vitest'
import { noticeSchema, type Notice } from '../../src/service/schemas/notice.ts'
import { fixture, flightRequest, postFlight, postProfile, startService } from './harness.ts'

const payload = {
  massG: 4200,
  packages: [
    { name: 'Ozone sonde', massG: 2400, smallestFaceCm2: 150 },
    { name: 'Camera', massG: 1500 },
  ],
}

test('a notice tells class, passages of levels and extent of a run', async () => {
  const service = await startService()
  const profile = await postProfile(service)
  const { run } = await postFlight(service, {
    launch: {
      latitudeDeg: 35.18,
      longitudeDeg: -97.44,
      altitudeM: 345,
      time: '2023-05-22T12:00:00Z',
    },
    neckLiftG: 5600,
    payload,
    air: { kind: 'profile', id: profile.id },
  })
  const answer = await service.http
    .get(`/v1/runs/${run.id}/notice?flightLevels=100,300,1900&altitudesM=300,15000`)
    .expect(200)
  const notice = noticeSchema.parse(answer.body)

  // 16 g/cm² over the smallest face of 2.4 kg (ICAO Annex 2, appendix on unmanned free balloons)
  expect(notice.balloonClass.name).toBe('heavy')
  expect(notice.balloonClass.reasons.join()).toContain('16.0 g/cm²')
  expect(notice.crossings.map(({ way, flightLevel }) => [way, flightLevel])).toEqual([
    ['up', 100],
    ['up', 300],
    ['up', undefined],
    ['down', undefined],
    ['down', 300],
    ['down', 100],
  ])
  expect(notice.notReached).toEqual({ flightLevels: [1900], altitudesM: [300] })
  expect(notice.extent.distanceM).toBeGreaterThanOrEqual(run.landing.distanceM - 1)
  expect(notice.cautions[0].code).toBe('airspace-notification')

  // FL 300 is 300.9 hPa (US Standard Atmosphere 1976, table I); the sounding says how high that is.
  const up = notice.crossings[1]
  expect(up.pressureHPa).toBeCloseTo(300.9, 1)
  const [below, above] = levelsAround(300.9)
  expect(up.altitudeM).toBeGreaterThan(below - 15)
  expect(up.altitudeM).toBeLessThan(above + 15)
  expect(Date.parse(up.time) / 1000 - Date.parse(run.plan.launch.time) / 1000).toBeCloseTo(
    up.elapsedS,
    0,
  )
})

/** Altitudes of the real sounding's neighbouring levels around a pressure in hPa. */
function levelsAround(pressure: number): [number, number] {
  const [heading, ...lines] = fixture('sounding-norman-2023-05-22.csv')
    .toString()
    .trim()
    .split(/\r?\n/)
  const names = heading.split(',').map((name) => name.trim())
  const [p, z] = ['pressure_hPa', 'geopotential height_m'].map((name) => names.indexOf(name))
  const rows = lines.map((line) => line.split(',').map(Number))
  const above = rows.findIndex((row) => row[p] < pressure)
  // Geopotential to geometric at 9.5 km: 14 m more (US Standard Atmosphere 1976, eq. 19).
  return [rows[above - 1][z] + 14, rows[above][z] + 14]
}

test('the class is that of the flight train as it is planned now', async () => {
  const service = await startService()
  const { flight, run } = await postFlight(service)
  const ask = async () =>
    (await service.http.get(`/v1/runs/${run.id}/notice`).expect(200)).body as Notice
  expect((await ask()).balloonClass).toMatchObject({
    name: 'light',
    missing: ['the force at which the line parts'],
  })
  const patch = (body: object) =>
    service.http.patch(`/v1/flights/${flight.id}`).send(body).expect(200)
  await patch({ payload: { lineStrengthN: 250 } })
  expect(await ask()).toMatchObject({ balloonClass: { name: 'heavy' }, planChanged: false })
  await patch({ neckLiftG: 2900 })
  expect((await ask()).planChanged).toBe(true)
})

test('levels that are none are refused by name', async () => {
  const service = await startService()
  const { run } = await postFlight(service, flightRequest())
  for (const query of ['flightLevels=abc', 'altitudesM=1e9', 'flightLevels=-3', 'levels=1']) {
    const answer = await service.http.get(`/v1/runs/${run.id}/notice?${query}`).expect(400)
    expect((answer.body as { detail: string }).detail).toContain(query.split('=')[0])
  }
  await service.http.get('/v1/runs/0193b0a0-0000-7000-8000-000000000000/notice').expect(404)
})
