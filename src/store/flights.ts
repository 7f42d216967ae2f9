import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

/** A stored flight. Times of its life are ISO 8601, the launch is in seconds since 1970 UTC. */
export interface FlightRow {
  id: string
  title: string
  launchTime: number
  /** The sounding that the plan names; null for other air */
  profileId: string | null
  /** The forecast that the plan names; null for other air */
  fieldId: string | null
  createdAt: string
  updatedAt: string
  /** JSON */
  plan: string
  /** JSON of what happened; null until somebody says */
  outcome: string | null
}

/** A flight with the answer of its newest run and the number of its runs. */
export interface FlightWithRuns extends FlightRow {
  runCount: number
  /** JSON */
  latestAnswer: string
}

/** Which flights: launched in [launchFrom, launchTo), title containing `title` whatever the case. */
export interface FlightFilter {
  launchFrom: number | null
  launchTo: number | null
  title: string | null
}

const COLUMNS = `flights.id, title, launch_time AS launchTime, flights.profile_id AS profileId,
  flights.field_id AS fieldId,  created_at AS createdAt, updated_at AS updatedAt, plan, outcome`

const WITH_RUNS = `${COLUMNS},
  (SELECT count(*) FROM runs WHERE flight_id = flights.id) AS runCount,
  (SELECT answer FROM runs WHERE flight_id = flights.id ORDER BY id DESC LIMIT 1) AS latestAnswer`

const MATCHES = `launch_time >= coalesce(@launchFrom, -1e18)
  AND launch_time < coalesce(@launchTo, 1e18)
  AND (@title IS NULL OR instr(lower(title), lower(@title)) > 0)`

/** The table of planned flights. */
export class Flights {
  private readonly inserting
  private readonly updating
  private readonly one
  private readonly listing
  private readonly matching
  private readonly removing
  private readonly counting

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO flights (id, title, launch_time, profile_id, field_id, created_at, updated_at, plan, outcome)
       VALUES (@id, @title, @launchTime, @profileId, @fieldId, @createdAt, @updatedAt, @plan, @outcome)`,
    )
    this.updating = database.prepare(
      `UPDATE flights SET title = @title, launch_time = @launchTime, profile_id = @profileId,
       field_id = @fieldId,       updated_at = @updatedAt, plan = @plan, outcome = @outcome WHERE id = @id`,
    )
    this.one = database.prepare<[string], FlightWithRuns>(
      `SELECT ${WITH_RUNS} FROM flights WHERE id = ?`,
    )
    this.listing = database.prepare<[object], FlightWithRuns>(
      `SELECT ${WITH_RUNS} FROM flights WHERE id < @before AND ${MATCHES}
       ORDER BY id DESC LIMIT @limit + 1`,
    )
    this.matching = database.prepare<[object], FlightRow>(
      `SELECT ${COLUMNS} FROM flights WHERE ${MATCHES} ORDER BY id LIMIT @limit`,
    )
    this.removing = database.prepare('DELETE FROM flights WHERE id = ?')
    this.counting = database.prepare<[], { count: number }>('SELECT count(*) AS count FROM flights')
  }

  insert(flight: FlightRow): void {
    this.inserting.run(flight)
  }

  /** Stores a changed flight; false where it is gone. */
  update(flight: FlightRow): boolean {
    return this.updating.run(flight).changes > 0
  }

  get(id: string): FlightWithRuns | undefined {
    return this.one.get(id)
  }

  list(filter: FlightFilter, request: PageRequest): Page<FlightWithRuns> {
    const rows = this.listing.all({ ...filter, before: beforeId(request), limit: request.limit })
    return page(rows, request)
  }

  /** At most `limit` flights that match, oldest first. */
  match(filter: FlightFilter, limit: number): FlightRow[] {
    return this.matching.all({ ...filter, limit })
  }

  /** Removes a flight with its runs; false where there was none. */
  remove(id: string): boolean {
    return this.removing.run(id).changes > 0
  }

  count(): number {
    return this.counting.get()?.count ?? 0
  }
}
