import type Database from 'better-sqlite3'

export type FetchState = 'running' | 'stored' | 'failed' | 'interrupted' | 'dropped'

/** A forecast run that was fetched from a source, or was to be. */
export interface FetchRow {
  id: string
  source: string
  /** Reference time of the run, s since 1970 UTC */
  runTime: number
  state: FetchState
  /** The field made of it, once stored */
  fieldId: string | null
  /** That the field takes on the disk */
  bytes: number
  complaint: string | null
  startedAt: string
  finishedAt: string | null
}

const COLUMNS = `id, source, run_time AS runTime, state, field_id AS fieldId, bytes, complaint,
  started_at AS startedAt, finished_at AS finishedAt`

/** The table of fetched forecast runs. */
export class Fetches {
  private readonly inserting
  private readonly updating
  private readonly interrupting
  private readonly newest
  private readonly storedOf

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO fetches (id, source, run_time, state, field_id, bytes, complaint, started_at,
         finished_at)
       VALUES (@id, @source, @runTime, @state, @fieldId, @bytes, @complaint, @startedAt,
         @finishedAt)`,
    )
    this.updating = database.prepare(
      `UPDATE fetches SET state = @state, field_id = @fieldId, bytes = @bytes,
         complaint = @complaint, finished_at = @finishedAt WHERE id = @id`,
    )
    this.interrupting = database.prepare<[string]>(
      `UPDATE fetches SET state = 'interrupted', finished_at = ? WHERE state = 'running'`,
    )
    this.newest = database.prepare<[string], FetchRow>(
      `SELECT ${COLUMNS} FROM fetches WHERE source = ? ORDER BY id DESC LIMIT 1`,
    )
    this.storedOf = database.prepare<[string], FetchRow>(
      `SELECT ${COLUMNS} FROM fetches WHERE source = ? AND state = 'stored'
       ORDER BY run_time DESC, id DESC`,
    )
  }

  insert(fetch: FetchRow): void {
    this.inserting.run(fetch)
  }

  update(fetch: FetchRow): void {
    this.updating.run(fetch)
  }

  /** Ends every running fetch as interrupted: at the start of the program none can be under way. */
  interruptAll(at: string): void {
    this.interrupting.run(at)
  }

  /** The fetch that was started last. */
  latest(source: string): FetchRow | undefined {
    return this.newest.get(source)
  }

  /** The runs that are kept, newest run first. */
  stored(source: string): FetchRow[] {
    return this.storedOf.all(source)
  }
}
