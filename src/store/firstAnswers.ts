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

/** The table of first answers. */
export class FirstAnswers {
  private readonly inserting
  private readonly one

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO first_answers (key, digest, location, answer, created_at)
       VALUES (@key, @digest, @location, @answer, @createdAt)`,
    )
    this.one = database.prepare<[string], FirstAnswer>(
      `SELECT key, digest, location, answer, created_at AS createdAt
       FROM first_answers WHERE key = ?`,
    )
  }

  insert(answer: FirstAnswer): void {
    this.inserting.run(answer)
  }

  get(key: string): FirstAnswer | undefined {
    return this.one.get(key)
  }
}
