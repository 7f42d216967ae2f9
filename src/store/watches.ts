import type Database from 'better-sqlite3'

/** Where a flight's events are posted. */
export interface WebhookColumns {
  webhookUrl: string | null
  webhookSecret: string | null
  /** JSON list of kinds of event */
  webhookKinds: string | null
}

/** A flight that is flown again whenever newer air arrives. Lengths in m, spans in s. */
export interface WatchRow extends WebhookColumns {
  flightId: string
  /** How far the landing moves before it is told */
  tellBeyond: number
  /** How far from the launch air may be observed */
  within: number
  /** How long before or after the release air may be valid */
  withinTime: number
  /** The run whose landing was told last */
  toldRunId: string
  createdAt: string
  updatedAt: string
}

/** Air valid at a time, s since 1970 UTC, that is due to be tried on the flights it may cover. */
export interface ArrivedAir {
  /** JSON as a plan names it */
  air: string
  validFrom: number
  validTo: number
  /** Flights released earlier than this are over */
  releasedAfter: number
}

/** The table of watches, and the flights that are due to be flown again. */
export class Watches {
  private readonly putting
  private readonly one
  private readonly telling
  private readonly removing
  private readonly falling
  private readonly nextDue
  private readonly duesOf
  private readonly settling

  constructor(database: Database.Database) {
    this.putting = database.prepare(
      `INSERT INTO watches (flight_id, tell_beyond, within, within_time, told_run_id,
         webhook_url, webhook_secret, webhook_kinds, created_at, updated_at)
       VALUES (@flightId, @tellBeyond, @within, @withinTime, @toldRunId,
         @webhookUrl, @webhookSecret, @webhookKinds, @createdAt, @updatedAt)
       ON CONFLICT (flight_id) DO UPDATE SET tell_beyond = @tellBeyond, within = @within,
         within_time = @withinTime, told_run_id = @toldRunId, webhook_url = @webhookUrl,
         webhook_secret = @webhookSecret, webhook_kinds = @webhookKinds, updated_at = @updatedAt`,
    )
    this.one = database.prepare<[string], WatchRow>(
      `SELECT flight_id AS flightId, tell_beyond AS tellBeyond, within, within_time AS withinTime,
         told_run_id AS toldRunId, webhook_url AS webhookUrl, webhook_secret AS webhookSecret,
         webhook_kinds AS webhookKinds, created_at AS createdAt, updated_at AS updatedAt
       FROM watches WHERE flight_id = ?`,
    )
    this.telling = database.prepare('UPDATE watches SET told_run_id = ? WHERE flight_id = ?')
    this.removing = database.prepare('DELETE FROM watches WHERE flight_id = ?')
    this.falling = database.prepare(
      `INSERT OR IGNORE INTO due_reruns (flight_id, air)
       SELECT flight_id, @air FROM watches JOIN flights ON flights.id = flight_id
       WHERE launch_time > @releasedAfter
         AND launch_time >= @validFrom - within_time AND launch_time <= @validTo + within_time`,
    )
    this.nextDue = database.prepare<[], { flightId: string }>(
      'SELECT flight_id AS flightId FROM due_reruns ORDER BY rowid LIMIT 1',
    )
    this.duesOf = database.prepare<[string], { air: string }>(
      'SELECT air FROM due_reruns WHERE flight_id = ? ORDER BY rowid',
    )
    this.settling = database.prepare('DELETE FROM due_reruns WHERE flight_id = ? AND air = ?')
  }

  /** Stores a watch in place of the flight's earlier one. */
  put(watch: WatchRow): void {
    this.putting.run(watch)
  }

  get(flightId: string): WatchRow | undefined {
    return this.one.get(flightId)
  }

  /** Remembers the run whose landing was told. */
  told(flightId: string, runId: string): void {
    this.telling.run(runId, flightId)
  }

  /** Ends a watch with all that is due or owed for it; false where there was none. */
  remove(flightId: string): boolean {
    return this.removing.run(flightId).changes > 0
  }

  /** Makes the watched flights due that air may cover by its time; the answer is how many. */
  arrive(arrived: ArrivedAir): number {
    return this.falling.run(arrived).changes
  }

  /** The flight that has been due longest; undefined where none is. */
  due(): string | undefined {
    return this.nextDue.get()?.flightId
  }

  /** The airs, JSON, that a flight is due to be tried in, first arrived first. */
  airsDue(flightId: string): string[] {
    return this.duesOf.all(flightId).map(({ air }) => air)
  }

  /** Strikes off what has been tried. */
  settle(flightId: string, airs: readonly string[]): void {
    for (const air of airs) this.settling.run(flightId, air)
  }
}
