import { XMLParser } from 'fast-xml-parser'
import { parse } from 'csv-parse/sync'
import { expect, test } from 'vitest'
import { type Run } from '../../src/service/schemas/run.ts'
import { type TrackRow } from '../../src/exchange/trackRow.ts'
import { postFlight, postProfile, startService, steadyWind, type Service } from './harness.ts'

async function postSteady({ http }: Service, from: number, speed: number): Promise<string> {
  const answer = await http.post('/v1/profiles').send(steadyWind(from, speed)).expect(201)
  return (answer.body as { profiles: { id: string }[] }).profiles[0].id
}

test('a stored flight flown in other air says how it shifted: new less old', async () => {
  const service = await startService()
  const west = await postSteady(service, 270, 10)
  const south = await postSteady(service, 180, 10)
  const { flight, run } = await postFlight(service, { air: { kind: 'profile', id: west } })
  const answer = await service.http
    .post(`/v1/flights/${flight.id}/runs`)
    .send({ air: { kind: 'profile', id: south } })
    .expect(201)
  const rerun = answer.body as Run
  expect(answer.headers.location).toBe(`/v1/runs/${rerun.id}`)

  // A steady 10 m/s for as long as it flies, eastwards then northwards, on a sphere grown by the height.
  const drift = 10 * run.landing.elapsedS
  expect(run.landing.distanceM / drift).toBeCloseTo(1, 2)
  expect(run.landing.bearingDeg).toBeCloseTo(90, 0)
  expect(rerun.landing.bearingDeg).toBeCloseTo(0, 0)
  expect(rerun.shift).toMatchObject({ againstRunId: run.id, planChanged: false })
  expect((rerun.shift?.landingDistanceM ?? 0) / (drift * Math.SQRT2)).toBeCloseTo(1, 1)
  expect(rerun.shift?.landingBearingDeg).toBeCloseTo(315, -1)
  expect(rerun.shift?.landingTimeS).toBeCloseTo(0, 1)
  expect(rerun.shift?.burstAltitudeM).toBeCloseTo(0, 2)

  const list = await service.http.get(`/v1/flights/${flight.id}/runs`).expect(200)
  expect((list.body as { items: Run[] }).items).toEqual([rerun, run])
  const back = await service.http
    .post(`/v1/flights/${flight.id}/runs`)
    .send({ air: { kind: 'profile', id: west } })
  expect((back.body as Run).shift?.againstRunId).toBe(rerun.id)
  expect((back.body as Run).shift?.landingBearingDeg).toBeCloseTo(135, -1)
})

test('a track comes in five forms that tell the same flight', async () => {
  const service = await startService()
  const profile = await postProfile(service)
  const { run } = await postFlight(service, {
    title: 'Ozone <3> & "more"',
    launch: {
      latitudeDeg: 35.18,
      longitudeDeg: -97.44,
      altitudeM: 345,
      time: '2023-05-22T12:00:00Z',
    },
    air: { kind: 'profile', id: profile.id },
  })
  const url = `/v1/runs/${run.id}/track`
  const json = await service.http.get(url).expect(200).expect('content-type', /json/)
  const { points } = json.body as { points: TrackRow[] }
  expect(Object.keys(points[0])).toEqual([
    'elapsedS',
    'time',
    'latitudeDeg',
    'longitudeDeg',
    'altitudeM',
    'verticalSpeedMs',
    'windFromDeg',
    'windSpeedMs',
    'phase',
  ])
  const place = ({
    time,
    latitudeDeg,
    longitudeDeg,
    altitudeM,
  }: Run['burst'] | Run['landing']) => ({
    time,
    latitudeDeg,
    longitudeDeg,
    altitudeM,
  })
  expect(points.find((point) => point.phase === 'burst')).toMatchObject(place(run.burst))
  expect(points.at(-1)).toMatchObject({ ...place(run.landing), phase: 'landing' })

  const csv = await service.http.get(url).set('accept', 'text/csv').expect('content-type', /csv/)
  const rows = parse(csv.text, { columns: true, cast: (value) => (isNaN(+value) ? value : +value) })
  expect(rows).toEqual(points)
  expect(csv.text).toContain('\r\n')

  const geo = await service.http.get(`${url}?format=geojson`).expect('content-type', /geo\+json/)
  const collection = geo.body as {
    features: { geometry: { coordinates: number[][] }; properties: { name: string } }[]
  }
  const [ascent, descent] = collection.features
  expect([...ascent.geometry.coordinates, ...descent.geometry.coordinates.slice(1)]).toEqual(
    points.map((point) => [point.longitudeDeg, point.latitudeDeg, point.altitudeM]),
  )
  expect(collection.features.map(({ properties }) => properties.name)).toEqual([
    'Ascent',
    'Descent',
    'Release',
    'Burst',
    'Landing',
  ])

  const xml = new XMLParser({ ignoreAttributes: false, attributeNamePrefix: '' })
  const gpx = await service.http.get(url).set('accept', 'application/gpx+xml').responseType('blob')
  const track = xml.parse((gpx.body as Buffer).toString()) as {
    gpx: {
      version: string
      metadata: { name: string; desc: string }
      trk: { trkseg: { trkpt: { lat: string; lon: string; ele: number; time: string }[] } }
    }
  }
  expect(track.gpx.version).toBe('1.1')
  expect(track.gpx.metadata.name).toBe('Ozone <3> & "more"')
  expect(track.gpx.metadata.desc).toMatch(/local regulation/)
  expect(
    track.gpx.trk.trkseg.trkpt.map(({ lat, lon, ele, time }) => [+lat, +lon, ele, time]),
  ).toEqual(points.map((p) => [p.latitudeDeg, p.longitudeDeg, p.altitudeM, p.time]))

  const kml = await service.http
    .get(`${url}?format=kml`)
    .responseType('blob')
    .expect('content-type', /kml/)
  const text = (kml.body as Buffer).toString()
  expect(xml.parse(text)).toHaveProperty('kml.Document.Placemark')
  expect(text).toContain('http://www.opengis.net/kml/2.2')
  const first = /<coordinates>([^ ]+) /.exec(text)?.[1].split(',').map(Number)
  expect(first).toEqual([points[0].longitudeDeg, points[0].latitudeDeg, points[0].altitudeM])

  await service.http.get(url).set('accept', 'image/png').expect(406)
  await service.http.get(`${url}?format=docx`).expect(400)
})

test('many flights are flown again, farthest shift first', async () => {
  const service = await startService()
  const strong = await postSteady(service, 270, 30)
  const ids: string[] = []
  for (const neckLiftG of [3600, 2000, 2600]) {
    ids.push((await postFlight(service, { neckLiftG })).flight.id)
  }
  const air = { kind: 'profile', id: strong }
  const answer = await service.http.post('/v1/reruns').send({ air }).expect(201)
  const { count, shifts } = answer.body as {
    count: number
    shifts: { flightId: string; runId: string; shift: { landingDistanceM: number } }[]
  }
  expect(count).toBe(3)
  // The less lift, the longer the flight and the farther the drift.
  expect(shifts.map(({ flightId }) => flightId)).toEqual([ids[1], ids[2], ids[0]])
  for (const { flightId, runId, shift } of shifts) {
    const run = (await service.http.get(`/v1/runs/${runId}`).expect(200)).body as Run
    expect(run).toMatchObject({ flightId, shift })
  }
  const some = { air, flightIds: [ids[0]] }
  expect((await service.http.post('/v1/reruns').send(some)).body).toMatchObject({ count: 1 })
  const none = { air, launchFrom: '2030-01-01T00:00:00Z' }
  expect((await service.http.post('/v1/reruns').send(none)).body).toEqual({ count: 0, shifts: [] })
})

test('when one of many cannot be flown again, nothing is stored', async () => {
  const service = await startService()
  // Where the air is colder aloft than the standard, a balloon with little free lift and cold gas floats.
  const frugal = await postFlight(service, {
    neckLiftG: 1700,
    gas: { kind: 'helium', temperatureOffsetK: -12 },
  })
  const sound = await postFlight(service)
  const levels = [
    { altitudeM: 0, pressureHPa: 1013, temperatureK: 300, windFromDeg: 0, windSpeedMs: 1 },
    { altitudeM: 16_000, temperatureK: 190, windFromDeg: 0, windSpeedMs: 1 },
  ]
  const upload = await service.http.post('/v1/profiles').send(steadyWind(0, 1, { levels }))
  const [{ id }] = (upload.body as { profiles: { id: string }[] }).profiles
  const answer = await service.http.post('/v1/reruns').send({ air: { kind: 'profile', id } })
  expect(answer.status).toBe(422)
  expect(answer.text).toContain(frugal.flight.id)
  for (const { flight } of [frugal, sound]) {
    const kept = await service.http.get(`/v1/flights/${flight.id}`)
    expect(kept.body).toMatchObject({ runCount: 1 })
  }
  const unknown = '01a00000-0000-7000-8000-000000000000'
  await service.http
    .post('/v1/reruns')
    .send({ air: { kind: 'standard' }, flightIds: [sound.flight.id, unknown] })
    .expect(422)
    .expect(/flightIds\/1/)
})
