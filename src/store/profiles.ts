import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

/** A stored sounding. Time in seconds since 1970 UTC, position in radians. */
export interface ProfileRow {
  id: string
  name: string
  validAt: number | null
  latitude: number | null
  longitude: number | null
  createdAt: string
  /** JSON that the API answers */
  summary: string
  /** JSON of the completed levels, SI */
  levels: string
}

/** Which soundings: valid in [validFrom, validTo). */
export interface ProfileFilter {
  validFrom: number | null
  validTo: number | null
}

/** The table of uploaded soundings. */
export class Profiles {
  private readonly inserting
  private readonly one
  private readonly listing
  private readonly removing
  private readonly using

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO profiles (id, name, valid_at, latitude, longitude, created_at, summary, levels)
       VALUES (@id, @name, @validAt, @latitude, @longitude, @createdAt, @summary, @levels)`,
    )
    this.one = database.prepare<[string], ProfileRow>(
      `SELECT id, name, valid_at AS validAt, latitude, longitude, created_at AS createdAt,
         summary, levels
       FROM profiles WHERE id = ?`,
    )
    this.listing = database.prepare<[object], { id: string; summary: string }>(
      `SELECT id, summary FROM profiles
       WHERE id < @before
         AND (@validFrom IS NULL OR valid_at >= @validFrom)
         AND (@validTo IS NULL OR valid_at < @validTo)
       ORDER BY id DESC LIMIT @limit + 1`,
    )
    this.removing = database.prepare('DELETE FROM profiles WHERE id = ?')
    this.using = database.prepare<[string, string], { runs: number; flights: number }>(
      `SELECT (SELECT count(*) FROM runs WHERE profile_id = ?) AS runs,
              (SELECT count(*) FROM flights WHERE profile_id = ?) AS flights`,
    )
  }

  insert(profile: ProfileRow): void {
    this.inserting.run(profile)
  }

  get(id: string): ProfileRow | undefined {
    return this.one.get(id)
  }

  list(filter: ProfileFilter, request: PageRequest): Page<{ id: string; summary: string }> {
    const rows = this.listing.all({ ...filter, before: beforeId(request), limit: request.limit })
    return page(rows, request)
  }

  /** How many runs were flown in a sounding and how many flights' plans name it. */
  uses(id: string): { runs: number; flights: number } {
    return this.using.get(id, id) ?? { runs: 0, flights: 0 }
  }

  /** Removes a sounding that nothing uses; false where there was none. */
  remove(id: string): boolean {
    return this.removing.run(id).changes > 0
  }
}
