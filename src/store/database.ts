import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import Database from 'better-sqlite3'

/**
 * Opens the database file, creating it where there is none, and brings its tables up to date.
 * What a transaction has committed survives a killed process and a lost power supply: the write-ahead
 * log is synced at every commit.
 * @throws Error where the file cannot be opened, is no database, or is newer than this program.
 */
export function openDatabase(file: string, migrations: string): Database.Database {
  const database = new Database(file)
  try {
    database.pragma('journal_mode = WAL')
    database.pragma('synchronous = FULL')
    database.pragma('foreign_keys = ON')
    database.pragma('busy_timeout = 5000')
    migrate(database, migrations)
  } catch (error) {
    database.close()
    throw error
  }
  return database
}

/** Applies the numbered files that the database has not seen, each in a transaction of its own. */
function migrate(database: Database.Database, folder: string): void {
  const files = readdirSync(folder)
    .filter((name) => /^\d{3}_.*\.sql$/.test(name))
    .sort()
  const current = database.pragma('user_version', { simple: true }) as number
  const newest = files.reduce((highest, name) => Math.max(highest, number(name)), 0)
  if (current > newest) {
    throw new Error(
      `the database is at version ${current}, this program knows versions up to ${newest}`,
    )
  }
  for (const name of files.filter((file) => number(file) > current)) {
    database.transaction(() => {
      database.exec(readFileSync(join(folder, name), 'utf8'))
      database.pragma(`user_version = ${number(name)}`)
    })()
  }
}

function number(file: string): number {
  return Number(file.slice(0, 3))
}
