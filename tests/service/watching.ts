import { type AddressInfo } from 'node:net'
import { setTimeout } from 'node:timers/promises'
import { type FastifyInstance } from 'fastify'
import { type FlightEvent } from '../../src/service/schemas/event.ts'
import { type ProfileAnswer } from '../../src/service/schemas/profile.ts'
import { isoTime } from '../../src/service/units.ts'
import { postFlight, steadyWind, type Service } from './harness.ts'

/** Release of the watched flights: tomorrow at noon or so, on the hour. */
export const RELEASE = Math.ceil(Date.now() / 3_600_000) * 3600 + 86_400

/** A time so many hours from the release, ISO 8601. */
export function hoursFromRelease(hours: number): string {
  return isoTime(RELEASE + hours * 3600)
}

/** A flight released tomorrow in still air, watched. */
export async function watchedFlight(service: Service, watch: object = {}): Promise<string> {
  const launch = {
    latitudeDeg: 47.05,
    longitudeDeg: 8.31,
    altitudeM: 450,
    time: hoursFromRelease(0),
  }
  const { flight } = await postFlight(service, { launch })
  await service.http
    .put(`/v1/flights/${flight.id}/watch`)
    .send({ tellBeyondM: 5000, ...watch })
    .expect(200)
  return flight.id
}

/** Uploads an invented steady wind, valid so many hours from the release. */
export async function arrive(
  { http }: Pick<Service, 'http'>,
  hours: number,
  speed: number,
  more: object = {},
): Promise<ProfileAnswer> {
  const sounding = steadyWind(270, speed, { validAt: hoursFromRelease(hours), ...more })
  const answer = await http.post('/v1/profiles').send(sounding).expect(201)
  return (answer.body as { profiles: ProfileAnswer[] }).profiles[0]
}

/** A flight's events, oldest first. */
export async function eventsOf(
  { http }: Pick<Service, 'http'>,
  id: string,
): Promise<FlightEvent[]> {
  const answer = await http
    .get(`/v1/flights/${id}/events?limit=200`)
    .set('accept', 'application/json')
    .expect(200)
  return (answer.body as { items: FlightEvent[] }).items.toReversed()
}

/** Waits until `done` holds; after ten seconds, fails. */
export async function until(done: () => boolean | Promise<boolean>): Promise<void> {
  for (let turn = 0; turn < 1000; turn++) {
    if (await done()) return
    await setTimeout(10)
  }
  throw new Error('it did not come about in ten seconds')
}

/** Waits until nothing is due to be flown again. */
export function settled({ store }: Pick<Service, 'store'>): Promise<void> {
  return until(() => store.watches.due() === undefined)
}

export function addressOf(app: FastifyInstance): string {
  return `http://127.0.0.1:${(app.server.address() as AddressInfo).port}`
}
