import { existsSync } from 'node:fs'
import { setImmediate, setTimeout } from 'node:timers/promises'
import { type FastifyBaseLogger } from 'fastify'
import { OutsideField } from '../fields/outsideField.ts'
import { NotFlyable } from '../physics/notFlyable.ts'
import { type ProfileRow } from '../store/profiles.ts'
import { type Store } from '../store/store.ts'
import { type WatchRow } from '../store/watches.ts'
import { type Airs } from './airs.ts'
import { type FieldFiles } from './fieldFiles.ts'
import { storedPlan, storedRun } from './flightAnswer.ts'
import { flyRun } from './flying.ts'
import { keepFailure, keepRun } from './keeping.ts'
import { Problem } from './problems.ts'
import { type FieldAnswer } from './schemas/field.ts'
import { type AirReference, type Plan } from './schemas/plan.ts'
import { type Run } from './schemas/run.ts'
import { seconds } from './units.ts'
import { covers, flownForecast, isBetter, remoteness, type Remoteness } from './watchedAir.ts'

/** No flight lasts longer than this, s: one released earlier is over. */
const LONGEST_FLIGHT = 86_400

/** How often, and how many ms, a forecast's file is waited for. */
const FILE_WAITS = 40
const FILE_WAIT = 25

interface Candidate {
  air: AirReference
  remoteness: Remoteness
}

/**
 * Flies watched flights again in newer air that covers them. What is due stands in the database from the
 * transaction that stored the air, so nothing is lost with a killed process.
 */
export class Watcher {
  private readonly store: Store
  private readonly airs: Airs
  private readonly files: FieldFiles
  private readonly log: FastifyBaseLogger
  private working: Promise<void> | undefined
  private stopped = false

  constructor(store: Store, airs: Airs, files: FieldFiles, log: FastifyBaseLogger) {
    this.store = store
    this.airs = airs
    this.files = files
    this.log = log
  }

  /** Makes the watched flights due that a sounding may cover; call it in the transaction that stores it. */
  arrived({ id, validAt, latitude }: ProfileRow): void {
    if (validAt === null || latitude === null) return // nobody can say what it covers
    const air: AirReference = { kind: 'profile', id }
    const due = this.store.watches.arrive({
      air: JSON.stringify(air),
      validFrom: validAt,
      validTo: validAt,
      releasedAfter: Date.now() / 1000 - LONGEST_FLIGHT,
    })
    if (due > 0) this.wake()
  }

  /**
   * Makes the watched flights due that a forecast may cover; call it in the transaction that stores it, and
   * `wake` once its file is in place.
   */
  fieldArrived({ id, validTimes }: Pick<FieldAnswer, 'id' | 'validTimes'>): void {
    const air: AirReference = { kind: 'field', id, outside: 'refuse' }
    this.store.watches.arrive({
      air: JSON.stringify(air),
      validFrom: Math.min(...validTimes.map(seconds)),
      validTo: Math.max(...validTimes.map(seconds)),
      releasedAfter: Date.now() / 1000 - LONGEST_FLIGHT,
    })
  }

  /** Starts on what is due, unless that is under way. */
  wake(): void {
    if (this.stopped) return
    this.working ??= this.work().finally(() => (this.working = undefined))
  }

  /** Finishes the flight in hand and stops. */
  async close(): Promise<void> {
    this.stopped = true
    await this.working
  }

  private async work(): Promise<void> {
    await setImmediate() // what woke this commits first, and answers
    for (;;) {
      const flightId = this.store.watches.due()
      if (flightId === undefined || this.stopped) return
      try {
        await this.settle(flightId)
      } catch (error) {
        this.log.error({ err: error, flightId }, 'a watched flight could not be flown again')
        if (!(await this.giveUp(flightId, error))) return // due again at the next arrival or start
      }
    }
  }

  /** Flies one flight in the best of the airs due for it that betters its last, and strikes them all off. */
  private async settle(flightId: string): Promise<void> {
    const due = this.store.watches.airsDue(flightId)
    await this.filesInPlace(due)
    const flight = this.store.flights.get(flightId)
    const watch = this.store.watches.get(flightId)
    if (!flight || !watch) return
    const plan = storedPlan(flight)
    const latest = storedRun(flight.latestAnswer)
    const open = flight.outcome === null && seconds(latest.landing.time) > Date.now() / 1000
    const keep = open ? this.flyBest(watch, plan, latest, due) : () => undefined
    await this.store.commit(() => {
      this.store.watches.settle(flightId, due)
      if (this.store.watches.get(flightId)) keep() // it may have been deleted meanwhile
    })
  }

  /** A forecast's file gets its place right after its row is stored: wait for it, not for long. */
  private async filesInPlace(due: readonly string[]): Promise<void> {
    const airs = due.map((json) => JSON.parse(json) as AirReference)
    const files = airs.flatMap((air) => (air.kind === 'field' ? [this.files.path(air.id)] : []))
    for (let wait = 0; wait < FILE_WAITS && !files.every(existsSync); wait++) {
      await setTimeout(FILE_WAIT)
    }
  }

  /** Strikes off what cannot be tried, so that other flights get their turn; false where even that fails. */
  private async giveUp(flightId: string, error: unknown): Promise<boolean> {
    try {
      await this.store.commit(() => {
        const due = this.store.watches.airsDue(flightId)
        const watch = this.store.watches.get(flightId)
        for (const air of due) {
          if (watch) keepFailure(this.store, watch, JSON.parse(air) as AirReference, error)
        }
        this.store.watches.settle(flightId, due)
      })
      return true
    } catch {
      return false
    }
  }

  /** Flies a plan in the best air that it can be flown in; the function returned stores what came of it. */
  private flyBest(watch: WatchRow, plan: Plan, latest: Run, due: readonly string[]): () => void {
    const flown = this.flown(latest, plan)
    const better = due
      .flatMap((json) => this.candidate(JSON.parse(json) as AirReference, plan, watch))
      .filter((candidate) => isBetter(candidate.remoteness, flown))
      .sort((a, b) => (isBetter(a.remoteness, b.remoteness) ? -1 : 1))
    const keep: (() => void)[] = []
    for (const { air } of better) {
      try {
        const made = flyRun(watch.flightId, { ...plan, air }, latest, this.airs)
        keep.push(() => {
          keepRun(this.store, made)
        })
        break
      } catch (error) {
        if (error instanceof OutsideField) continue // it does not cover the flight
        if (!(error instanceof NotFlyable)) throw error
        keep.push(() => {
          keepFailure(this.store, watch, air, error)
        })
      }
    }
    return () => {
      for (const one of keep) one()
    }
  }

  /** A sounding is kept as long as a run that was flown in it; a forecast need not be. */
  private flown(latest: Run, plan: Plan): Remoteness {
    const { air } = latest.plan
    return air.kind === 'field'
      ? flownForecast(latest, plan)
      : remoteness(this.airs.source(air), plan)
  }

  /** Air that is due, if it covers the flight; none where it was deleted meanwhile. */
  private candidate(air: AirReference, plan: Plan, watch: WatchRow): Candidate[] {
    try {
      const source = this.airs.source(air)
      return covers(source, plan, watch) ? [{ air, remoteness: remoteness(source, plan) }] : []
    } catch (error) {
      if (error instanceof Problem) return []
      throw error
    }
  }
}
