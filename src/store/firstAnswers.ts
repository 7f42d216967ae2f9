import type Database from 'better-sqlite3'

/** The first answer to a creating request, kept under the key that the client gave it. */
export interface FirstAnswer {
  key: string
  /** Of method, path and body: the same key with another digest is another request */
  digest: Buffer
  location: string | null
  /** JSON */
  answer: string
  createdAt: string
}

const HOUR = 3_600_000
const WEEK = 7 * 24 * HOUR

/** The table of first answers. */
export class FirstAnswers {
  private readonly inserting
  private readonly one
  private readonly removing
  private lastForgot = -Infinity

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO first_answers (key, digest, location, answer, created_at)
       VALUES (@key, @digest, @location, @answer, @createdAt)`,
    )
    this.one = database.prepare<[string], FirstAnswer>(
      `SELECT key, digest, location, answer, created_at AS createdAt
       FROM first_answers WHERE key = ?`,
    )
    this.removing = database.prepare('DELETE FROM first_answers WHERE created_at < ?')
  }

  /** Keeps an answer, and now and then forgets those of more than a week before it. */
  insert(answer: FirstAnswer): void {
    this.inserting.run(answer)
    const now = Date.parse(answer.createdAt)
    if (now - this.lastForgot < HOUR) return
    this.lastForgot = now
    this.removing.run(new Date(now - WEEK).toISOString())
  }

  get(key: string): FirstAnswer | undefined {
    return this.one.get(key)
  }
}
