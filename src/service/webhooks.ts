import { type FastifyBaseLogger } from 'fastify'
import { type DeliveryRow } from '../store/deliveries.ts'
import { type Store } from '../store/store.ts'
import { type WatchRow } from '../store/watches.ts'
import { faultyRequest } from './problems.ts'
import { type FlightEvent } from './schemas/event.ts'
import { postWebhook } from './webhookPost.ts'

/** Whether webhooks are posted: not at all, to public addresses only, or to any address. */
export type WebhookMode = 'off' | 'public' | 'on'

/** How webhooks are tried. Times in ms. */
export interface WebhookTiming {
  /** For one attempt */
  timeout: number
  /** Before the second attempt; twice as long before each that follows */
  firstDelay: number
  longestDelay: number
  attempts: number
}

/** Tried for some nine hours. Assumptions: a ground station's network is away for hours, not for days. */
export const WEBHOOK_TIMING: WebhookTiming = {
  timeout: 15_000,
  firstDelay: 5000,
  longestDelay: 3_600_000,
  attempts: 18,
}

/** Deliveries under way at once. */
const MOST_AT_ONCE = 8

/** Status by which a receiver says that it wants no more (Standard Webhooks, "Delivery"). */
const GONE = 410

/** Posts the events that are owed to webhooks, again and again until they are taken. */
export class Webhooks {
  private readonly store: Store
  private readonly mode: WebhookMode
  private readonly timing: WebhookTiming
  private readonly log: FastifyBaseLogger
  private readonly underWay = new Map<string, Promise<void>>()
  private readonly unlisten: () => void
  private timer: NodeJS.Timeout | undefined
  private stopped = false

  constructor(store: Store, mode: WebhookMode, timing: WebhookTiming, log: FastifyBaseLogger) {
    this.store = store
    this.mode = mode
    this.timing = timing
    this.log = log
    this.unlisten = store.events.listen(() => {
      this.wake()
    })
  }

  /** @throws Problem 422 where this service posts no webhooks */
  mustBeOn(): void {
    if (this.mode !== 'off') return
    throw faultyRequest(422, [
      {
        path: '/webhook',
        message:
          'cannot be posted: webhooks are switched off. Start the service with WEBHOOKS=public for public addresses, or WEBHOOKS=on for any',
      },
    ])
  }

  /** Posts what is due and sleeps until the next is. */
  wake(): void {
    clearTimeout(this.timer)
    if (this.stopped || this.mode === 'off') return
    const present = Date.now() / 1000
    for (const delivery of this.store.deliveries.next(2 * MOST_AT_ONCE)) {
      if (this.underWay.size >= MOST_AT_ONCE) return // whichever ends first wakes this again
      if (this.underWay.has(delivery.eventId)) continue
      if (delivery.dueAt > present) {
        const wait = Math.min(this.timing.longestDelay, (delivery.dueAt - present) * 1000)
        this.timer = setTimeout(() => {
          this.wake()
        }, wait)
        return
      }
      const trying = this.attempt(delivery).then(
        () => {
          this.underWay.delete(delivery.eventId)
          this.wake()
        },
        (error: unknown) => {
          // The store failed: what is owed stays so, and is tried again at the next start.
          this.log.error({ err: error, eventId: delivery.eventId }, 'a webhook’s end is not stored')
        },
      )
      this.underWay.set(delivery.eventId, trying)
    }
  }

  /** Waits for the attempts in hand; what is owed still is after the next start. */
  async close(): Promise<void> {
    this.stopped = true
    this.unlisten()
    clearTimeout(this.timer)
    await Promise.all(this.underWay.values())
  }

  private async attempt(delivery: DeliveryRow): Promise<void> {
    const { eventId, flightId } = delivery
    const watch = this.store.watches.get(flightId)
    const event = this.store.events.get(eventId)
    const complaint = watch && event ? await this.post(watch, eventId, event.answer) : null
    const attempts = delivery.attempts + 1
    await this.store.commit(() => {
      if (complaint === null || complaint === GONE || attempts >= this.timing.attempts) {
        this.store.deliveries.remove(eventId)
        return
      }
      const { firstDelay, longestDelay } = this.timing
      const delay = Math.min(longestDelay, firstDelay * 2 ** delivery.attempts)
      const dueAt = Date.now() / 1000 + delay / 1000
      this.store.deliveries.postpone({ ...delivery, attempts, dueAt, complaint })
    })
    if (complaint !== null) this.log.warn({ eventId, attempts, complaint }, 'webhook not taken')
  }

  /** Posts one event: null where it was taken, else why not. */
  private async post(watch: WatchRow, id: string, answer: string) {
    const { webhookUrl: url, webhookSecret: secret } = watch
    if (url === null || secret === null) return null // the watch was changed meanwhile
    const event = JSON.parse(answer) as FlightEvent
    const body = JSON.stringify({ type: event.kind, timestamp: event.at, data: event })
    try {
      const privateAddresses = this.mode === 'on'
      const { timeout } = this.timing
      const status = await postWebhook({ id, url, secret, body }, { privateAddresses, timeout })
      if (status >= 200 && status < 300) return null
      return status === GONE ? GONE : `answered with status ${status}`
    } catch (error) {
      return error instanceof Error ? error.message : String(error)
    }
  }
}
