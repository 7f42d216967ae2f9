import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

/** Something that happened to a flight's prediction. */
export interface EventRow {
  id: string
  flightId: string
  kind: string
  /** JSON that the API answers */
  answer: string
}

/** The table of events. An event is never changed. */
export class Events {
  private readonly listeners = new Set<() => void>()
  private telling = false
  private readonly inserting
  private readonly one
  private readonly newest
  private readonly listing
  private readonly following

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      'INSERT INTO events (id, flight_id, kind, answer) VALUES (@id, @flightId, @kind, @answer)',
    )
    this.one = database.prepare<[string], EventRow>(
      'SELECT id, flight_id AS flightId, kind, answer FROM events WHERE id = ?',
    )
    this.newest = database.prepare<[string], { id: string }>(
      'SELECT id FROM events WHERE flight_id = ? ORDER BY id DESC LIMIT 1',
    )
    this.listing = database.prepare<[object], EventRow>(
      `SELECT id, flight_id AS flightId, kind, answer FROM events
       WHERE flight_id = @flightId AND id < @before ORDER BY id DESC LIMIT @limit + 1`,
    )
    this.following = database.prepare<[object], EventRow>(
      `SELECT id, flight_id AS flightId, kind, answer FROM events
       WHERE flight_id = @flightId AND id > @after ORDER BY id LIMIT @limit`,
    )
  }

  /** Stores an event; listeners hear of it once the transaction around this has ended. */
  insert(event: EventRow): void {
    this.inserting.run(event)
    if (this.telling) return
    this.telling = true
    setImmediate(() => {
      this.telling = false
      for (const listener of this.listeners) listener()
    })
  }

  /** Calls `listener` soon after events were stored; the function returned stops that. */
  listen(listener: () => void): () => void {
    this.listeners.add(listener)
    return () => this.listeners.delete(listener)
  }

  get(id: string): EventRow | undefined {
    return this.one.get(id)
  }

  /** The id of a flight's newest event; empty, which is before every id, where it has none. */
  newestId(flightId: string): string {
    return this.newest.get(flightId)?.id ?? ''
  }

  list(flightId: string, request: PageRequest): Page<EventRow> {
    const before = beforeId(request)
    return page(this.listing.all({ flightId, before, limit: request.limit }), request)
  }

  /** At most `limit` events of a flight after the one with the id `after`, oldest first. */
  after(flightId: string, after: string, limit: number): EventRow[] {
    return this.following.all({ flightId, after, limit })
  }
}
