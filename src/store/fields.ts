import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

/** A stored forecast, but for its values. */
export interface FieldRow {
  id: string
  name: string
  /** Seconds since 1970 UTC */
  referenceTime: number
  createdAt: string
  /** JSON that the API answers */
  summary: string
}

/** The table of uploaded forecasts. */
export class Fields {
  private readonly inserting
  private readonly one
  private readonly listing
  private readonly removing
  private readonly using
  private readonly releasing

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO fields (id, name, reference_time, created_at, summary)
       VALUES (@id, @name, @referenceTime, @createdAt, @summary)`,
    )
    this.one = database.prepare<[string], FieldRow>(
      `SELECT id, name, reference_time AS referenceTime, created_at AS createdAt, summary
       FROM fields WHERE id = ?`,
    )
    this.listing = database.prepare<[object], { id: string; summary: string }>(
      'SELECT id, summary FROM fields WHERE id < @before ORDER BY id DESC LIMIT @limit + 1',
    )
    this.removing = database.prepare('DELETE FROM fields WHERE id = ?')
    this.releasing = database.prepare('UPDATE runs SET field_id = NULL WHERE field_id = ?')
    this.using = database.prepare<[string, string], { runs: number; flights: number }>(
      `SELECT (SELECT count(*) FROM runs WHERE field_id = ?) AS runs,
              (SELECT count(*) FROM flights WHERE field_id = ?) AS flights`,
    )
  }

  /** Lets the runs that were flown in a forecast stand without it: they keep their answers and tracks. */
  release(id: string): void {
    this.releasing.run(id)
  }

  insert(field: FieldRow): void {
    this.inserting.run(field)
  }

  get(id: string): FieldRow | undefined {
    return this.one.get(id)
  }

  list(request: PageRequest): Page<{ id: string; summary: string }> {
    const rows = this.listing.all({ before: beforeId(request), limit: request.limit })
    return page(rows, request)
  }

  /** How many runs were flown in a forecast and how many flights' plans name it. */
  uses(id: string): { runs: number; flights: number } {
    return this.using.get(id, id) ?? { runs: 0, flights: 0 }
  }

  /** Removes a forecast that nothing uses; false where there was none. */
  remove(id: string): boolean {
    return this.removing.run(id).changes > 0
  }
}
