import { mkdtempSync, rmSync } from 'node:fs'
import { createServer, type IncomingHttpHeaders, type ServerResponse } from 'node:http'
import { type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { Webhook } from 'standardwebhooks'
import request from 'supertest'
import { describe, expect, it, onTestFinished } from 'vitest'
import { buildApp, type AppOptions } from '../../src/service/app.ts'
import { type FlightEvent } from '../../src/service/schemas/event.ts'
import { type Watch } from '../../src/service/schemas/watch.ts'
import { isPublicAddress, signature } from '../../src/service/webhookPost.ts'
import { Store } from '../../src/store/store.ts'
import { MIGRATIONS, startService, type Service } from './harness.ts'
import { arrive, settled, until, watchedFlight } from './watching.ts'

const SECRET = `whsec_${Buffer.from('an invented secret of 32 bytes !').toString('base64')}`
const QUICK: AppOptions = { webhooks: 'on', webhookTiming: { firstDelay: 20, timeout: 500 } }

interface Post {
  headers: IncomingHttpHeaders
  body: string
}

/** A ground station that answers the n-th post as told; later ones as the last. */
async function groundStation(...answers: ((response: ServerResponse) => void)[]) {
  const posts: Post[] = []
  const server = createServer((incoming, response) => {
    let body = ''
    incoming.on('data', (chunk: Buffer) => (body += chunk.toString()))
    incoming.on('end', () => {
      posts.push({ headers: incoming.headers, body })
      const answer = answers[Math.min(posts.length, answers.length) - 1]
      answer(response)
    })
  })
  await new Promise<void>((listening) => server.listen(0, '127.0.0.1', listening))
  onTestFinished(() => {
    server.closeAllConnections()
    server.close()
  })
  return { posts, url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/moved` }
}

const status =
  (code: number, headers = {}) =>
  (response: ServerResponse) =>
    response.writeHead(code, headers).end()

const webhookTo = (url: string, more: object = {}) => ({
  webhook: { url, secret: SECRET, ...more },
})

async function owedTo({ http }: Pick<Service, 'http'>, id: string) {
  const watch = (await http.get(`/v1/flights/${id}/watch`).expect(200)).body as Watch
  return watch.webhook?.owed ?? []
}

/** A service on a database of its own that outlives it. */
async function startOn(file: string, options: AppOptions): Promise<Service> {
  const store = new Store(file, MIGRATIONS)
  const app = await buildApp(store, false, options)
  await app.listen({ host: '127.0.0.1', port: 0 })
  return { app, store, http: request(app.server) }
}

describe('a webhook', () => {
  it('gets a signed message when the landing moved, as the specification’s library checks it', async () => {
    const station = await groundStation(status(204))
    const service = await startService(QUICK)
    const id = await watchedFlight(service, webhookTo(station.url))
    await arrive(service, -6, 10)
    await until(() => station.posts.length === 1)
    await arrive(service, -3, 10.01) // a new run that moves by less than 5 km
    await settled(service)
    await until(async () => (await owedTo(service, id)).length === 0)
    expect(station.posts).toHaveLength(1)

    const [{ headers, body }] = station.posts
    expect(headers['content-type']).toBe('application/json')
    // standardwebhooks: reference library of the Standard Webhooks specification
    const message = new Webhook(SECRET).verify(body, headers as Record<string, string>) as {
      type: string
      timestamp: string
      data: FlightEvent
    }
    expect(message).toMatchObject({
      type: 'landing-moved',
      data: { flightId: id, tellBeyondM: 5000, id: headers['webhook-id'] },
    })
    expect(message.timestamp).toBe(message.data.at)
    expect(() =>
      new Webhook(SECRET).verify(`${body} `, headers as Record<string, string>),
    ).toThrow()
  })

  it('is tried again, later and later, until it is taken; a redirect is no taking', async () => {
    const elsewhere = await groundStation(status(204))
    const station = await groundStation(
      status(500),
      status(307, { location: elsewhere.url }),
      () => undefined, // never answers
      (response) => response.destroy(),
      status(200),
    )
    const service = await startService(QUICK)
    const id = await watchedFlight(service, webhookTo(station.url))
    await arrive(service, -6, 10)
    await until(() => station.posts.length === 2)
    await until(async () => (await owedTo(service, id))[0]?.attempts === 2)
    expect((await owedTo(service, id))[0]?.complaint).toBe('answered with status 307')
    await until(async () => (await owedTo(service, id)).length === 0)
    expect(station.posts).toHaveLength(5)
    expect(new Set(station.posts.map(({ body }) => body)).size).toBe(1)
    expect(new Set(station.posts.map(({ headers }) => headers['webhook-id'])).size).toBe(1)
    expect(elsewhere.posts).toEqual([])
  })

  it('is let be when it is gone, or after the last attempt', async () => {
    const gone = await groundStation(status(410))
    const broken = await groundStation(status(503))
    const service = await startService({
      webhooks: 'on',
      webhookTiming: { firstDelay: 5, attempts: 3 },
    })
    const one = await watchedFlight(service, webhookTo(gone.url))
    const other = await watchedFlight(service, webhookTo(broken.url))
    await arrive(service, -6, 10)
    await until(() => broken.posts.length === 3)
    await until(async () => (await owedTo(service, other)).length === 0)
    expect(await owedTo(service, one)).toEqual([])
    expect(gone.posts).toHaveLength(1)
  })

  it('gets what it is owed after a restart', async () => {
    const folder = mkdtempSync(join(tmpdir(), 'driftbook-'))
    const file = join(folder, 'a.sqlite')
    const station = await groundStation(status(500), status(200))
    const before = await startOn(file, { ...QUICK, webhookTiming: { firstDelay: 1500 } })
    const id = await watchedFlight(before, webhookTo(station.url))
    await arrive(before, -6, 10)
    await until(async () => (await owedTo(before, id))[0]?.attempts === 1)
    await before.app.close()
    before.store.close()
    const after = await startOn(file, QUICK)
    onTestFinished(async () => {
      await after.app.close()
      after.store.close()
      rmSync(folder, { recursive: true })
    })
    await until(() => station.posts.length === 2)
    await until(async () => (await owedTo(after, id)).length === 0)
    expect(station.posts[1].body).toBe(station.posts[0].body)
  })

  it('is posted the kinds of event that it asked for', async () => {
    const station = await groundStation(status(204))
    const service = await startService(QUICK)
    await watchedFlight(service, webhookTo(station.url, { kinds: ['run-stored'] }))
    await arrive(service, -6, 10)
    await until(() => station.posts.length === 1)
    expect(JSON.parse(station.posts[0].body)).toMatchObject({ type: 'run-stored' })
  })

  it('is refused where webhooks are off, saying how they are switched on', async () => {
    const service = await startService()
    const id = await watchedFlight(service)
    const answer = await service.http
      .put(`/v1/flights/${id}/watch`)
      .send({ tellBeyondM: 1, ...webhookTo('https://station.example/') })
      .expect(422)
    expect(answer.body).toMatchObject({ errors: [{ path: '/webhook' }] })
    expect(answer.text).toContain('WEBHOOKS=on')
  })

  it.each([
    'http://127.0.0.1:9/',
    'http://localhost:9/',
    'http://[::1]:9/',
    'http://2130706433:9/',
  ])('at %s is not reached where only public addresses are allowed', async (url) => {
    const service = await startService({ ...QUICK, webhooks: 'public' })
    const id = await watchedFlight(service, webhookTo(url))
    await arrive(service, -6, 10)
    await until(async () => (await owedTo(service, id))[0]?.attempts > 0)
    expect((await owedTo(service, id))[0]?.complaint).toContain('is no public address')
  })

  it('never has its secret answered', async () => {
    const service = await startService(QUICK)
    const id = await watchedFlight(service, webhookTo('http://127.0.0.1:9/'))
    const { text } = await service.http.get(`/v1/flights/${id}/watch`).expect(200)
    expect(text).toContain('http://127.0.0.1:9/')
    expect(text).not.toContain(SECRET.slice(6))
  })
})

it('signs as the reference library of the Standard Webhooks specification does', () => {
  const at = new Date('2026-12-05T09:00:00Z')
  const message = { id: 'e1', url: '', secret: SECRET, body: '{"höhe":30000}' }
  const reference = new Webhook(SECRET).sign('e1', at, message.body)
  expect(signature(message, at.getTime() / 1000)).toBe(reference)
})

// IANA IPv4 and IPv6 special-purpose address registries
it.each([
  ['10.1.2.3', false],
  ['100.64.0.1', false],
  ['127.0.0.1', false],
  ['169.254.169.254', false],
  ['172.31.255.255', false],
  ['172.32.0.0', true],
  ['192.168.1.1', false],
  ['224.0.0.1', false],
  ['255.255.255.255', false],
  ['9.9.9.9', true],
  ['::1', false],
  ['::', false],
  ['::ffff:127.0.0.1', false],
  ['fe80::1', false],
  ['fd00::1', false],
  ['ff02::1', false],
  ['2002:7f00:1::', false],
  ['2001:db8::1', false],
  ['2620:fe::9', true],
  ['station.example', false],
])('%s is a public address: %s', (address, expected) => {
  expect(isPublicAddress(address)).toBe(expected)
})
