import type Database from 'better-sqlite3'
import { Deliveries } from './deliveries.ts'
import { Events } from './events.ts'
import { Fetches } from './fetches.ts'
import { FirstAnswers } from './firstAnswers.ts'
import { Flights } from './flights.ts'
import { GroupCommit } from './groupCommit.ts'
import { openDatabase } from './database.ts'
import { Jobs } from './jobs.ts'
import { Profiles } from './profiles.ts'
import { Runs } from './runs.ts'
import { Watches } from './watches.ts'

/** Everything that Driftbook keeps. */
export class Store {
  readonly flights: Flights
  readonly runs: Runs
  readonly profiles: Profiles
  readonly firstAnswers: FirstAnswers
  readonly jobs: Jobs
  readonly watches: Watches
  readonly events: Events
  readonly deliveries: Deliveries
  readonly fetches: Fetches
  private readonly database: Database.Database
  private readonly group: GroupCommit

  /** Opens the database `file`, applying what is new in the folder `migrations`. */
  constructor(file: string, migrations: string) {
    this.database = openDatabase(file, migrations)
    this.group = new GroupCommit(this.database)
    this.flights = new Flights(this.database)
    this.runs = new Runs(this.database)
    this.profiles = new Profiles(this.database)
    this.firstAnswers = new FirstAnswers(this.database)
    this.jobs = new Jobs(this.database)
    this.watches = new Watches(this.database)
    this.events = new Events(this.database)
    this.deliveries = new Deliveries(this.database)
    this.fetches = new Fetches(this.database)
  }

  /**
   * Runs `write` as one transaction: all that it writes is stored, or none where it throws. Resolves when
   * it is on the disk, together with what other requests write at the same moment.
   */
  commit(write: () => void): Promise<void> {
    return this.group.commit(write)
  }

  close(): void {
    this.database.close()
  }
}
