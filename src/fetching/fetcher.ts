import { rm } from 'node:fs/promises'
import { join } from 'node:path'
import { v7 as uuid } from 'uuid'
import { type FetchRow } from '../store/fetches.ts'
import { type Store } from '../store/store.ts'
import { PATIENCE, type Patience } from './download.ts'
import { FetchError } from './fetchError.ts'
import { bytesOf, fetchRun } from './fetchRun.ts'
import { newestRun, nextAvailable, type SourceSettings } from './sourceSettings.ts'

/** Where fetched messages become a field. */
export interface FieldShelf {
  /** Stores messages as one field, whole or not at all; `bytes` is what it takes on the disk. */
  store: (chunks: AsyncIterable<Uint8Array>) => Promise<{ id: string; bytes: number }>
  /** Removes a field; false where something still uses it. */
  remove: (id: string) => Promise<boolean>
}

/** Longest sleep, ms: a clock that was set is noticed in time. */
const LONGEST_SLEEP = 600_000

/** Why a run is not fetched though it was asked for. */
export class NotFetched extends Error {}

/** Fetches the newest runs of the configured sources as they come out, and keeps the last of them. */
export class Fetcher {
  readonly sources: readonly SourceSettings[]
  private readonly store: Store
  private readonly shelf: FieldShelf
  private readonly folder: string
  private readonly patience: Patience
  private readonly underWay = new Map<string, Promise<void>>()
  private readonly timers = new Map<string, NodeJS.Timeout>()
  private readonly abort = new AbortController()

  /** `folder` takes what is not whole yet. Fetches that an earlier program left are marked as interrupted. */
  constructor(
    sources: readonly SourceSettings[],
    store: Store,
    shelf: FieldShelf,
    folder: string,
    patience: Patience = PATIENCE,
  ) {
    this.sources = sources
    this.store = store
    this.shelf = shelf
    this.folder = folder
    this.patience = patience
    store.fetches.interruptAll(new Date().toISOString())
  }

  /** Begins to look after every source. */
  start(): void {
    for (const source of this.sources) this.look(source)
  }

  /** Stops every fetch; what is whole of a run is gone on with after the next start. */
  async close(): Promise<void> {
    this.abort.abort(new FetchError('the service stopped', 'none'))
    for (const timer of this.timers.values()) clearTimeout(timer)
    await Promise.all(this.underWay.values())
  }

  /** When a source is looked at next of itself, s since 1970 UTC; null where no run follows. */
  nextLook(source: SourceSettings): number | null {
    const present = Date.now() / 1000
    const due = newestRun(source, present)
    if (due === null || this.newestStored(source) >= due) {
      return nextAvailable(source, due ?? present)
    }
    const last = this.store.fetches.latest(source.name)
    const tried = last?.runTime === due && last.finishedAt !== null && last.state === 'failed'
    return tried ? Date.parse(last.finishedAt ?? '') / 1000 + source.lookAgainAfterS : present
  }

  /**
   * Starts to fetch a run now; without `runTime` (s since 1970 UTC) the newest that is there. Resolves when
   * the fetch stands in the store; one that is under way is let go on.
   * @throws NotFetched where there is no such run, or one as new is kept
   */
  async fetchNow(source: SourceSettings, runTime?: number): Promise<void> {
    if (this.underWay.has(source.name)) return
    const run = runTime ?? newestRun(source, Date.now() / 1000)
    if (run === null) throw new NotFetched('No run of this source is there yet.')
    if (this.newestStored(source) >= run) {
      throw new NotFetched('This run, or a newer one, is kept already.')
    }
    const row: FetchRow = {
      id: uuid(),
      source: source.name,
      runTime: run,
      state: 'running',
      fieldId: null,
      bytes: 0,
      complaint: null,
      startedAt: new Date().toISOString(),
      finishedAt: null,
    }
    const stands = this.store.commit(() => {
      this.store.fetches.insert(row)
    })
    const working = stands
      .then(() => this.fetch(source, row))
      .then(
        () => {
          this.underWay.delete(source.name)
          this.look(source)
        },
        () => {
          // The store failed: nothing would come of trying at once.
          this.underWay.delete(source.name)
          this.sleep(source, LONGEST_SLEEP)
        },
      )
    this.underWay.set(source.name, working)
    await stands
  }

  private newestStored({ name }: SourceSettings): number {
    return this.store.fetches.stored(name).at(0)?.runTime ?? -Infinity
  }

  /** Fetches what is due, or sleeps until something is. */
  private look(source: SourceSettings): void {
    if (this.abort.signal.aborted) return
    const at = this.nextLook(source)
    if (at === null) return
    const wait = at * 1000 - Date.now()
    if (wait > 0) this.sleep(source, wait)
    else {
      this.fetchNow(source).catch(() => {
        this.sleep(source, LONGEST_SLEEP)
      })
    }
  }

  private sleep(source: SourceSettings, wait: number): void {
    clearTimeout(this.timers.get(source.name))
    if (this.abort.signal.aborted) return
    const next = () => {
      this.look(source)
    }
    this.timers.set(source.name, setTimeout(next, Math.min(LONGEST_SLEEP, wait)))
  }

  /** Fetches a run, and stores how it ended. */
  private async fetch(source: SourceSettings, row: FetchRow): Promise<void> {
    const folder = join(this.folder, source.name, String(row.runTime))
    let left = source.diskBudgetMB * 1e6
    const spend = (bytes: number) => {
      left -= bytes
      if (left < 0) throw new FetchError('the run is larger than the disk budget', 'none')
    }
    const { signal } = this.abort
    let end: Partial<FetchRow>
    try {
      const asking = { patience: this.patience, signal, spend }
      const files = await fetchRun(source, row.runTime, folder, asking)
      const { id, bytes } = await this.shelf.store(bytesOf(files))
      await rm(folder, { recursive: true, force: true })
      end = { state: 'stored', fieldId: id, bytes }
    } catch (error) {
      const complaint = error instanceof Error ? error.message : String(error)
      end = signal.aborted ? { state: 'interrupted' } : { state: 'failed', complaint }
    }
    await this.store.commit(() => {
      this.store.fetches.update({ ...row, ...end, finishedAt: new Date().toISOString() })
    })
    if (end.state === 'stored') await this.makeRoom(source)
  }

  /** Drops the oldest runs beyond the number and the disk budget; the newest stays whatever its size. */
  private async makeRoom(source: SourceSettings): Promise<void> {
    const kept = this.store.fetches.stored(source.name)
    let bytes = 0
    for (const [place, row] of kept.entries()) {
      bytes += row.bytes
      const fits = place < source.keepRuns && bytes <= source.diskBudgetMB * 1e6
      if (place === 0 || fits) continue
      if (row.fieldId === null || !(await this.shelf.remove(row.fieldId))) continue
      bytes -= row.bytes
      await this.store.commit(() => {
        this.store.fetches.update({ ...row, state: 'dropped' })
      })
    }
    await rm(join(this.folder, source.name), { recursive: true, force: true }) // older runs' remains
  }
}
