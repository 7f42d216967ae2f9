import { describe, expect, it } from 'vitest'
import { type FlightEvent } from '../../src/service/schemas/event.ts'
import { startService, type Service } from './harness.ts'
import { addressOf, arrive, eventsOf, settled, until, watchedFlight } from './watching.ts'

interface Received {
  id: string
  event: string
  data: FlightEvent
}

/** Reads a flight's stream into `received` until it ends or `stop` is called. */
async function listen({ app }: Service, id: string, headers: Record<string, string> = {}) {
  const abort = new AbortController()
  const response = await fetch(`${addressOf(app)}/v1/flights/${id}/events`, {
    headers,
    signal: abort.signal,
  })
  expect(response.status).toBe(200)
  expect(response.headers.get('content-type')).toBe('text/event-stream; charset=utf-8')
  const received: Received[] = []
  const reading = (async () => {
    const decoder = new TextDecoder()
    let text = ''
    for await (const chunk of response.body ?? []) {
      text += decoder.decode(chunk as Uint8Array, { stream: true })
      const blocks = text.split('\n\n')
      text = blocks.pop() ?? ''
      for (const block of blocks) {
        const [, at, event, data] = /^id: (.+)\nevent: (.+)\ndata: (.*)$/.exec(block) ?? []
        received.push({ id: at, event, data: JSON.parse(data) as FlightEvent })
      }
    }
  })()
  const stop = async () => {
    abort.abort()
    await reading.catch(() => undefined)
  }
  return { received, reading, stop }
}

describe('the events of a flight', () => {
  it('arrive as they happen, and go on after the last that was read', async () => {
    const service = await startService()
    const id = await watchedFlight(service)
    const first = await listen(service, id)
    await arrive(service, -6, 10)
    await until(() => first.received.length === 2)
    expect(first.received.map(({ event }) => event)).toEqual(['run-stored', 'landing-moved'])
    await first.stop()

    await arrive(service, -3, 20) // while nobody listens
    await settled(service)
    const lastRead = first.received[0].id
    const second = await listen(service, id, { 'last-event-id': lastRead })
    await until(() => second.received.length === 3)
    await arrive(service, -1, 20.1)
    await until(() => second.received.length === 4)
    await second.stop()

    const stored = await eventsOf(service, id)
    expect(second.received.map(({ data }) => data)).toEqual(stored.slice(2))
    for (const { id: at, event, data } of second.received) {
      expect([at, event]).toEqual([data.id, data.kind])
    }
    const all = await listen(service, id, { 'last-event-id': '0' })
    await until(() => all.received.length === stored.length)
    await all.stop()
    expect(all.received.map(({ data }) => data)).toEqual(stored)
  })

  it('of another flight are not among them', async () => {
    const service = await startService()
    const id = await watchedFlight(service, { withinM: 0 })
    const stream = await listen(service, id)
    const other = await watchedFlight(service)
    await arrive(service, -1, 20)
    await settled(service)
    expect(await eventsOf(service, other)).toHaveLength(3)
    await stream.stop()
    expect(stream.received).toEqual([])
  })

  it('end orderly when the service stops, with nobody cut off', async () => {
    const service = await startService()
    const id = await watchedFlight(service)
    const { reading } = await listen(service, id)
    const start = performance.now()
    await service.app.close()
    await reading // would throw on a connection that breaks off
    expect(performance.now() - start).toBeLessThan(5000)
  })

  it('are a paged list, newest first, for who asks for JSON', async () => {
    const service = await startService()
    const id = await watchedFlight(service)
    for (const [hours, speed] of [
      [-6, 10],
      [-3, 20],
    ]) {
      await arrive(service, hours, speed)
      await settled(service)
    }
    const all = await eventsOf(service, id)
    expect(all).toHaveLength(5)
    const paged: FlightEvent[] = []
    let cursor = ''
    do {
      const answer = await service.http
        .get(`/v1/flights/${id}/events?limit=2${cursor && `&cursor=${cursor}`}`)
        .set('accept', 'application/json')
        .expect(200)
      const page = answer.body as { items: FlightEvent[]; nextCursor: string | null }
      paged.push(...page.items)
      cursor = page.nextCursor ?? ''
    } while (cursor)
    expect(paged.toReversed()).toEqual(all)
  })

  it('refuse what they are not', async () => {
    const service = await startService()
    const id = await watchedFlight(service)
    const events = `/v1/flights/${id}/events`
    await service.http.get(events).set('accept', 'image/png').expect(406)
    await service.http.get(events).set('last-event-id', 'seven').expect(400)
    await service.http.get(`${events}?cursor=abc`).expect(400)
    await service.http.get('/v1/flights/0190d0a0-0000-7000-8000-000000000001/events').expect(404)
  })
})
