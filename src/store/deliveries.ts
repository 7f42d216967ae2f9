import type Database from 'better-sqlite3'

/** An event that is owed to a flight's webhook. */
export interface DeliveryRow {
  eventId: string
  flightId: string
  /** Attempts made so far */
  attempts: number
  /** When it is tried next, s since 1970 UTC */
  dueAt: number
  /** Why the last attempt failed; null before the first */
  complaint: string | null
}

const COLUMNS = 'event_id AS eventId, flight_id AS flightId, attempts, due_at AS dueAt, complaint'

/** The table of events owed to webhooks. */
export class Deliveries {
  private readonly inserting
  private readonly listing
  private readonly postponing
  private readonly removing
  private readonly cancelling
  private readonly owing

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO deliveries (event_id, flight_id, attempts, due_at, complaint)
       VALUES (@eventId, @flightId, @attempts, @dueAt, @complaint)`,
    )
    this.listing = database.prepare<[number], DeliveryRow>(
      `SELECT ${COLUMNS} FROM deliveries ORDER BY due_at, event_id LIMIT ?`,
    )
    this.postponing = database.prepare(
      `UPDATE deliveries SET attempts = @attempts, due_at = @dueAt, complaint = @complaint
       WHERE event_id = @eventId`,
    )
    this.removing = database.prepare('DELETE FROM deliveries WHERE event_id = ?')
    this.cancelling = database.prepare('DELETE FROM deliveries WHERE flight_id = ?')
    this.owing = database.prepare<[string], DeliveryRow>(
      `SELECT ${COLUMNS} FROM deliveries WHERE flight_id = ? ORDER BY event_id`,
    )
  }

  insert(delivery: DeliveryRow): void {
    this.inserting.run(delivery)
  }

  /** At most `limit` deliveries, due first. */
  next(limit: number): DeliveryRow[] {
    return this.listing.all(limit)
  }

  /** Stores that an attempt failed and when the next is made. */
  postpone(delivery: DeliveryRow): void {
    this.postponing.run(delivery)
  }

  /** Strikes off what was delivered or given up. */
  remove(eventId: string): void {
    this.removing.run(eventId)
  }

  /** Strikes off all that is owed for a flight. */
  removeAll(flightId: string): void {
    this.cancelling.run(flightId)
  }

  /** What is owed for a flight, oldest event first. */
  owed(flightId: string): DeliveryRow[] {
    return this.owing.all(flightId)
  }
}
