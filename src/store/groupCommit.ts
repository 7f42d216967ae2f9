import type Database from 'better-sqlite3'

interface Waiting {
  write: () => void
  stored: () => void
  failed: (error: unknown) => void
}

/**
 * Commits what several requests write at the same moment together: the disk is synced once for all of
 * them, and each is told only then. Each write still stands alone: where it throws, it alone is undone.
 */
export class GroupCommit {
  private readonly database: Database.Database
  private waiting: Waiting[] = []

  constructor(database: Database.Database) {
    this.database = database
  }

  /** Runs `write` in a transaction soon; resolves when it is synced to the disk, rejects where it throws. */
  commit(write: () => void): Promise<void> {
    return new Promise((stored, failed) => {
      if (this.waiting.length === 0)
        setImmediate(() => {
          this.flush()
        })
      this.waiting.push({ write, stored, failed })
    })
  }

  private flush(): void {
    const group = this.waiting
    this.waiting = []
    const settle: (() => void)[] = []
    try {
      this.database
        .transaction(() => {
          for (const { write, stored, failed } of group) {
            try {
              this.database.transaction(write)() // nested: a savepoint of its own
              settle.push(stored)
            } catch (error) {
              settle.push(() => {
                failed(error)
              })
            }
          }
        })
        .immediate()
    } catch (error) {
      for (const { failed } of group) failed(error)
      return
    }
    for (const tell of settle) tell()
  }
}
