import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

/** A stored run: its answer as JSON and its track as packed points. */
export interface RunRow {
  id: string
  flightId: string
  profileId: string | null
  fieldId: string | null
  answer: string
  track: Buffer
}

/** The table of runs. A run is never changed. */
export class Runs {
  private readonly inserting
  private readonly one
  private readonly latestOf
  private readonly listing
  private readonly trackOf
  private readonly everyOf

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO runs (id, flight_id, profile_id, field_id, answer, track)
       VALUES (@id, @flightId, @profileId, @fieldId, @answer, @track)`,
    )
    this.one = database.prepare<[string], { answer: string }>(
      'SELECT answer FROM runs WHERE id = ?',
    )
    this.latestOf = database.prepare<[string], { answer: string }>(
      'SELECT answer FROM runs WHERE flight_id = ? ORDER BY id DESC LIMIT 1',
    )
    this.listing = database.prepare<[object], { id: string; answer: string }>(
      `SELECT id, answer FROM runs WHERE flight_id = @flightId AND id < @before
       ORDER BY id DESC LIMIT @limit + 1`,
    )
    this.trackOf = database.prepare<[string], { answer: string; track: Buffer }>(
      'SELECT answer, track FROM runs WHERE id = ?',
    )
    this.everyOf = database.prepare<[string], { answer: string }>(
      'SELECT answer FROM runs WHERE flight_id = ? ORDER BY id DESC',
    )
  }

  insert(run: RunRow): void {
    this.inserting.run(run)
  }

  /** A run's answer, JSON. */
  answer(id: string): string | undefined {
    return this.one.get(id)?.answer
  }

  /** The answer of a flight's newest run, JSON. */
  latestAnswer(flightId: string): string | undefined {
    return this.latestOf.get(flightId)?.answer
  }

  /** The answers of all of a flight's runs, JSON, newest first. */
  allAnswers(flightId: string): string[] {
    return this.everyOf.all(flightId).map((row) => row.answer)
  }

  list(flightId: string, request: PageRequest): Page<{ id: string; answer: string }> {
    const before = beforeId(request)
    return page(this.listing.all({ flightId, before, limit: request.limit }), request)
  }

  withTrack(id: string): { answer: string; track: Buffer } | undefined {
    return this.trackOf.get(id)
  }
}
