import type Database from 'better-sqlite3'
import { FirstAnswers } from './firstAnswers.ts'
import { Flights } from './flights.ts'
import { openDatabase } from './database.ts'
import { Profiles } from './profiles.ts'
import { Runs } from './runs.ts'

/** Everything that Driftbook keeps. */
export class Store {
  readonly flights: Flights
  readonly runs: Runs
  readonly profiles: Profiles
  readonly firstAnswers: FirstAnswers
  private readonly database: Database.Database

  /** Opens the database `file`, applying what is new in the folder `migrations`. */
  constructor(file: string, migrations: string) {
    this.database = openDatabase(file, migrations)
    this.flights = new Flights(this.database)
    this.runs = new Runs(this.database)
    this.profiles = new Profiles(this.database)
    this.firstAnswers = new FirstAnswers(this.database)
  }

  /** Runs `work` as one transaction: all that it writes is stored, or none where it throws. */
  atomically<Result>(work: () => Result): Result {
    return this.database.transaction(work).immediate()
  }

  close(): void {
    this.database.close()
  }
}
