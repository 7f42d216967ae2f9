import fc from 'fast-check'
import { describe, expect, test } from 'vitest'
import { fixture, flightRequest, postFlight, postProfile, startService } from './harness.ts'

interface ProblemBody {
  type: string
  title: string
  status: number
  detail: string
  errors?: { path: string; message: string }[]
}

const base = flightRequest()
const launch = (change: object) => ({ launch: { ...base.launch, ...change } })
const balloon = (change: object) => ({ balloon: { ...base.balloon, ...change } })

/** Change of the documented request, status, path that is named, and what the message must say. */
const REFUSED: [string, object, number, string, RegExp][] = [
  [
    'latitude beyond the pole',
    launch({ latitudeDeg: 90.1 }),
    400,
    '/launch/latitudeDeg',
    /90.*90\.1/,
  ],
  ['longitude beyond 180', launch({ longitudeDeg: -181 }), 400, '/launch/longitudeDeg', /-180/],
  ['no longitude', launch({ longitudeDeg: undefined }), 400, '/launch/longitudeDeg', /missing/],
  ['a time without zone', launch({ time: '2026-12-05T09:00:00' }), 400, '/launch/time', /zone/],
  ['a time that is none', launch({ time: 'noon' }), 400, '/launch/time', /ISO 8601/],
  ['a day that is none', launch({ time: '2026-02-30T09:00:00Z' }), 400, '/launch/time', /ISO 8601/],
  ['a negative mass', balloon({ massG: -1200 }), 400, '/balloon/massG', /at least 1, is -1200/],
  ['a payload of nothing', { payload: { massG: 0 } }, 400, '/payload/massG', /at least 1/],
  ['text for a number', { neckLiftG: '2600' }, 400, '/neckLiftG', /number/],
  ['an unknown member', { fillG: 1 }, 400, '/fillG', /no member/],
  ['an unknown inner member', balloon({ maker: 'x' }), 400, '/balloon/maker', /no member/],
  ['an unknown gas', { gas: { kind: 'methane' } }, 400, '/gas/kind', /helium.*hydrogen/],
  [
    'two parachutes in one',
    { parachute: { dragAreaM2: 1, diameterM: 1 } },
    400,
    '/parachute/diameterM',
    /no member/,
  ],
  [
    'half a parachute',
    { parachute: { diameterM: 1 } },
    400,
    '/parachute/dragCoefficient',
    /missing/,
  ],
  ['an unknown drag curve', { drag: { curve: 'cube' } }, 400, '/drag/curve', /smooth-sphere/],
  [
    'a constant without value',
    { drag: { curve: 'constant' } },
    400,
    '/drag/coefficient',
    /missing/,
  ],
  ['an unknown air', { air: { kind: 'dragon' } }, 400, '/air/kind', /standard.*profile/],
  ['an id that is none', { air: { kind: 'profile', id: 'x' } }, 400, '/air/id', /UUID/i],
  [
    'a sounding that is not there',
    { air: { kind: 'profile', id: '01a00000-0000-7000-8000-000000000000' } },
    422,
    '/air/id',
    /no sounding/,
  ],
  [
    'neck lift not above payload',
    { neckLiftG: 1500 },
    422,
    '/neckLiftG',
    /1500 g must exceed .* 1500 g/,
  ],
  [
    'burst diameter not above the fill',
    balloon({ ratedBurstDiameterM: 1.5 }),
    422,
    '/balloon/ratedBurstDiameterM',
    /1\.50 m must exceed .* 1\.93 m/,
  ],
  [
    'no burst below 50 km',
    balloon({ ratedBurstDiameterM: 30 }),
    422,
    '/balloon/ratedBurstDiameterM',
    /50000 m.*30\.00 m/,
  ],
  [
    'bursting below the landing altitude',
    { ...balloon({ ratedBurstDiameterM: 2.1 }), landingAltitudeM: 8000 },
    422,
    '/landingAltitudeM',
    /8000 m/,
  ],
]

test.each(REFUSED)('%s is refused', async (_name, change, status, path, message) => {
  const service = await startService()
  for (const url of ['/v1/flights', '/v1/trials']) {
    const answer = await service.http.post(url).send(flightRequest(change))
    expect(answer.status, answer.text).toBe(status)
    expect(answer.headers['content-type']).toMatch('application/problem+json')
    const problem = answer.body as ProblemBody
    expect(problem).toMatchObject({ type: 'about:blank', status })
    const fault = problem.errors?.find((error) => error.path === path)
    expect(fault?.message, answer.text).toMatch(message)
  }
  expect(service.store.flights.count()).toBe(0)
})

describe('bodies that are no JSON, or too large, or of another kind', () => {
  const text = JSON.stringify(base)
  const BODIES: [string, string, string, number, string][] = [
    ['NaN', text.replace('47.05', 'NaN'), 'application/json', 400, '/launch/latitudeDeg'],
    ['1e999', text.replace('47.05', '1e999'), 'application/json', 400, '/launch/latitudeDeg'],
    ['cut short', text.slice(0, 100), 'application/json', 400, 'JSON'],
    ['empty', '', 'application/json', 400, 'empty'],
    ['a list', '[]', 'application/json', 400, 'object'],
    ['null', 'null', 'application/json', 400, 'object'],
    ['a poisoned prototype', '{"__proto__":{"a":1}}', 'application/json', 400, 'not allowed'],
    ['over 1 MB', `{"title":"${'x'.repeat(1_000_001)}"}`, 'application/json', 413, ''],
    ['XML', '<flight/>', 'application/xml', 415, 'content type'],
    ['a form', 'a=1', 'application/x-www-form-urlencoded', 415, 'content type'],
  ]

  test.each(BODIES)('%s', async (_name, body, type, status, said) => {
    const service = await startService()
    const answer = await service.http.post('/v1/flights').set('content-type', type).send(body)
    expect(answer.status, answer.text).toBe(status)
    expect(answer.headers['content-type']).toMatch('application/problem+json')
    expect(answer.text).toContain(said)
    expect(service.store.flights.count()).toBe(0)
    await postFlight(service)
  })
})

describe('soundings that are none', () => {
  const norman = fixture('sounding-norman-2023-05-22.csv').toString()
  const SOUNDINGS: [string, string | Buffer, number, RegExp][] = [
    ['binary junk', Buffer.from([0x1f, 0x8b, 8, 0, 255, 254, 0, 1, 2, 3]), 400, /./],
    ['nothing', '', 400, /empty/],
    ['one line', norman.split('\n').slice(0, 2).join('\n'), 422, /wind/],
    ['a heading without unit', 'pressure,height\n1000,100\n900,1000', 400, /unit/],
    ['JSON cut short', '{"name":"x","levels":[', 400, /./],
    [
      'too hot',
      '{"name":"x","levels":[{"altitudeM":0,"pressureHPa":1000,"temperatureK":500,"windFromDeg":0,"windSpeedMs":1},{"altitudeM":1000,"temperatureK":280,"windFromDeg":0,"windSpeedMs":1}]}',
      422,
      /500.*350/,
    ],
    [
      'pressure rising with height',
      '{"name":"x","levels":[{"altitudeM":0,"pressureHPa":900,"temperatureK":280,"windFromDeg":0,"windSpeedMs":1},{"altitudeM":1000,"pressureHPa":950,"temperatureK":280,"windFromDeg":0,"windSpeedMs":1}]}',
      422,
      /900|950/,
    ],
    [
      'a wind over 150 m/s',
      '{"name":"x","levels":[{"altitudeM":0,"windFromDeg":0,"windSpeedMs":151},{"altitudeM":1000,"windFromDeg":0,"windSpeedMs":1}]}',
      422,
      /151.*150/,
    ],
  ]

  test.each(SOUNDINGS)('%s', async (_name, body, status, said) => {
    const service = await startService()
    const answer = await service.http
      .post('/v1/profiles')
      .set('content-type', 'application/octet-stream')
      .send(body)
    expect(answer.status, answer.text).toBe(status)
    expect(answer.headers['content-type']).toMatch('application/problem+json')
    expect(answer.text).toMatch(said)
    const list = await service.http.get('/v1/profiles')
    expect(list.body).toEqual({ items: [], nextCursor: null })
    await postProfile(service)
  })

  test('over 20 MB', async () => {
    const service = await startService()
    const body = Buffer.alloc(20_000_001, 'x')
    const answer = await service.http
      .post('/v1/profiles')
      .set('content-type', 'text/csv')
      .send(body)
    expect(answer.status).toBe(413)
    await postProfile(service)
  })
})

test('unknown places and ids are 404, malformed ones 4xx', async () => {
  const { http } = await startService()
  const unknown = '01a00000-0000-7000-8000-000000000000'
  for (const url of ['/v2/flights', '/v1/flights/%zz', `/v1/runs/${unknown}`, '/v1/runs/7']) {
    const answer = await http.get(url)
    expect([400, 404]).toContain(answer.status)
    expect(answer.headers['content-type']).toMatch('application/problem+json')
  }
  await http
    .post(`/v1/flights/${unknown}/runs`)
    .send({ air: { kind: 'standard' } })
    .expect(404)
  await http
    .get('/v1/flights?limit=0')
    .expect(400)
    .expect(/\?limit/)
  await http
    .get('/v1/flights?sort=up')
    .expect(400)
    .expect(/\?sort/)
  await http.put('/v1/flights').expect(404)
})

test('nothing that a client posts gets a 5xx', { timeout: 60_000 }, async () => {
  const service = await startService()
  const urls = fc.constantFrom('/v1/flights', '/v1/trials', '/v1/reruns', '/v1/profiles')
  // The documented request with one member, at any depth, replaced by any JSON value.
  const paths = [
    'launch',
    'launch.time',
    'launch.altitudeM',
    'balloon.massG',
    'neckLiftG',
    'air',
    'drag',
    'parachute',
    'title',
    'gas.purity',
    'landingAltitudeM',
    'balloon.ratedBurstDiameterM',
  ]
  const replaced = fc
    .tuple(fc.constantFrom(...paths), fc.oneof(fc.jsonValue(), fc.double(), fc.constant(-0)))
    .map(([path, value]) => {
      const body = structuredClone(base) as Record<string, unknown>
      const [outer, inner] = path.split('.')
      if (inner) (body[outer] as Record<string, unknown>)[inner] = value
      else body[outer] = value
      return JSON.stringify(body)
    })
  const bodies = fc.oneof(
    replaced,
    fc.json(),
    fc.string(),
    replaced.map((text) => text.slice(0, -7)),
  )
  await fc.assert(
    fc.asyncProperty(urls, bodies, async (url, payload) => {
      const answer = await service.app.inject({
        method: 'POST',
        url,
        payload,
        headers: { 'content-type': 'application/json' },
      })
      expect(answer.statusCode, answer.body).toBeLessThan(500)
      if (answer.statusCode >= 400) {
        expect(answer.headers['content-type']).toMatch('application/problem+json')
      }
    }),
    { numRuns: 600 },
  )
  await postFlight(service)
})
