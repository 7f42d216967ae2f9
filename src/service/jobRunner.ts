import { v7 as uuid } from 'uuid'
import { type Progress } from '../planning/pool.ts'
import { type JobEnd, type JobRow } from '../store/jobs.ts'
import { type Store } from '../store/store.ts'
import { Problem, problemBody } from './problems.ts'

/** Work that takes longer than this becomes a job, ms. */
const PATIENCE = 2000

/** Most pieces of work under way at once; more are sent away with 503. */
const MOST_UNDER_WAY = 32

export type JobKind = 'dispersion' | 'windows'

/** Works a request out to the JSON of its answer. The request is its own JSON, defaults filled in. */
export type Work = (request: unknown, signal: AbortSignal, progress: Progress) => Promise<string>

/** Told of a running job's progress, 0 to 1, and then once of how it ended. */
export interface JobWatcher {
  progress: (share: number) => void
  end: (row: JobRow) => void
}

interface UnderWay {
  abort: AbortController
  progress: number
  watchers: Set<JobWatcher>
  /** Where the work has outlasted its request: the end of it stored */
  ended: Promise<void> | undefined
}

/** Works requests out; those that take long go on as jobs. */
export class JobRunner {
  private readonly store: Store
  private readonly works: Record<JobKind, Work>
  private readonly underWay = new Map<string, UnderWay>()

  /** Jobs that an earlier program left running are marked as interrupted. */
  constructor(store: Store, works: Record<JobKind, Work>) {
    this.store = store
    this.works = works
    store.jobs.interruptAll(now())
  }

  /**
   * Works a request out: its answer where that is there within two seconds, else the job that goes on.
   * @throws what the work throws within that time, or Problem 503 where too much is under way
   */
  async run(kind: JobKind, request: unknown): Promise<{ answer: string } | { job: JobRow }> {
    if (this.underWay.size >= MOST_UNDER_WAY) {
      const message = `${MOST_UNDER_WAY} long calculations are under way: try again in some seconds.`
      throw new Problem(503, message)
    }
    const id = uuid()
    const abort = new AbortController()
    const current: UnderWay = { abort, progress: 0, watchers: new Set(), ended: undefined }
    this.underWay.set(id, current)
    const working = this.works[kind](request, abort.signal, (share) => {
      current.progress = share
      for (const watcher of current.watchers) watcher.progress(share)
    })
    let timer: NodeJS.Timeout | undefined
    const waiting = new Promise<null>((resolve) => {
      timer = setTimeout(resolve, PATIENCE, null)
    })
    try {
      const answer = await Promise.race([working, waiting])
      if (answer !== null) {
        this.underWay.delete(id)
        return { answer }
      }
    } catch (error) {
      this.underWay.delete(id)
      throw error
    } finally {
      clearTimeout(timer)
    }
    // The end is awaited only after the job stands in the store, and is caught from now on.
    const caught = working.then(
      (answer) => ({ state: 'done', answer, problem: null }) as const,
      (error: unknown) => endOf(error, abort.signal),
    )
    await this.store.commit(() => {
      this.store.jobs.insert({ id, kind, request: JSON.stringify(request), createdAt: now() })
    })
    current.ended = caught.then((end) => this.finish({ id, ...end, finishedAt: now() }))
    return { job: this.get(id) }
  }

  /** @throws Problem 404 */
  get(id: string): JobRow {
    const row = this.store.jobs.get(id)
    if (!row) throw new Problem(404, `There is no job with the id ${id}.`)
    return row
  }

  /** How far a job is, 0 to 1; null where it is not under way. */
  progress(id: string): number | null {
    return this.underWay.get(id)?.progress ?? null
  }

  /** Tells a watcher of a job until it ends; the function returned stops that. */
  watch(id: string, watcher: JobWatcher): () => void {
    const current = this.underWay.get(id)
    if (!current) {
      watcher.end(this.get(id))
      return () => undefined
    }
    current.watchers.add(watcher)
    return () => current.watchers.delete(watcher)
  }

  /** Stops a running job; resolves when it stands as cancelled. @throws Problem 404, or 409 where it has ended */
  async cancel(id: string): Promise<JobRow> {
    const row = this.get(id)
    const current = this.underWay.get(id)
    if (row.state !== 'running' || !current) {
      throw new Problem(409, `The job is ${row.state}: only a running job can be cancelled.`)
    }
    current.abort.abort(new Cancelled())
    await current.ended
    return this.get(id)
  }

  /** Works a job's request out again. @throws Problem 404 */
  repeat(id: string): Promise<{ answer: string } | { job: JobRow }> {
    const { kind } = this.get(id)
    const request: unknown = JSON.parse(this.store.jobs.request(id) ?? 'null')
    return this.run(kind as JobKind, request)
  }

  /** Stops all work; running jobs stand as interrupted. */
  async close(): Promise<void> {
    const open = [...this.underWay.values()]
    for (const { abort } of open) abort.abort(new Interrupted())
    await Promise.all(open.flatMap(({ ended }) => ended ?? []))
  }

  private async finish(end: JobEnd): Promise<void> {
    await this.store.commit(() => {
      this.store.jobs.finish(end)
    })
    const current = this.underWay.get(end.id)
    this.underWay.delete(end.id)
    const row = this.get(end.id)
    for (const watcher of current?.watchers ?? []) watcher.end(row)
  }
}

class Cancelled extends Error {}
class Interrupted extends Problem {
  constructor() {
    super(503, 'The service is stopping: try again in a minute.')
  }
}

function endOf(error: unknown, signal: AbortSignal): Omit<JobEnd, 'id' | 'finishedAt'> {
  const reason: unknown = signal.aborted ? signal.reason : undefined
  if (reason instanceof Cancelled) return { state: 'cancelled', answer: null, problem: null }
  if (reason instanceof Interrupted) return { state: 'interrupted', answer: null, problem: null }
  return { state: 'failed', answer: null, problem: JSON.stringify(problemBody(error)) }
}

function now(): string {
  return new Date().toISOString()
}
