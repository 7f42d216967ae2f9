import type Database from 'better-sqlite3'
import { beforeId, page, type Page, type PageRequest } from './page.ts'

export type JobState = 'running' | 'done' | 'failed' | 'cancelled' | 'interrupted'

/** A long piece of work. Its request and answer are not among it: they may be long. */
export interface JobRow {
  id: string
  kind: string
  state: JobState
  /** JSON, once failed */
  problem: string | null
  createdAt: string
  finishedAt: string | null
}

/** How a job ended. */
export interface JobEnd {
  id: string
  state: Exclude<JobState, 'running'>
  /** JSON, once done */
  answer: string | null
  problem: string | null
  finishedAt: string
}

const COLUMNS = 'id, kind, state, problem, created_at AS createdAt, finished_at AS finishedAt'

/** The table of jobs. */
export class Jobs {
  private readonly inserting
  private readonly finishing
  private readonly interrupting
  private readonly one
  private readonly listing
  private readonly requesting
  private readonly answering

  constructor(database: Database.Database) {
    this.inserting = database.prepare(
      `INSERT INTO jobs (id, kind, state, request, created_at)
       VALUES (@id, @kind, 'running', @request, @createdAt)`,
    )
    this.finishing = database.prepare(
      `UPDATE jobs SET state = @state, answer = @answer, problem = @problem, finished_at = @finishedAt
       WHERE id = @id AND state = 'running'`,
    )
    this.interrupting = database.prepare<[string]>(
      `UPDATE jobs SET state = 'interrupted', finished_at = ? WHERE state = 'running'`,
    )
    this.one = database.prepare<[string], JobRow>(`SELECT ${COLUMNS} FROM jobs WHERE id = ?`)
    this.listing = database.prepare<[object], JobRow>(
      `SELECT ${COLUMNS} FROM jobs WHERE id < @before ORDER BY id DESC LIMIT @limit + 1`,
    )
    this.requesting = database.prepare<[string], { request: string }>(
      'SELECT request FROM jobs WHERE id = ?',
    )
    this.answering = database.prepare<[string], { answer: string | null }>(
      'SELECT answer FROM jobs WHERE id = ?',
    )
  }

  insert(job: { id: string; kind: string; request: string; createdAt: string }): void {
    this.inserting.run(job)
  }

  /** Ends a running job; one that has ended stays as it is. */
  finish(end: JobEnd): void {
    this.finishing.run(end)
  }

  /** Ends every running job as interrupted: at the start of the program none can be under way. */
  interruptAll(at: string): void {
    this.interrupting.run(at)
  }

  get(id: string): JobRow | undefined {
    return this.one.get(id)
  }

  list(request: PageRequest): Page<JobRow> {
    const rows = this.listing.all({ before: beforeId(request), limit: request.limit })
    return page(rows, request)
  }

  /** JSON of what the job was asked. */
  request(id: string): string | undefined {
    return this.requesting.get(id)?.request
  }

  /** JSON of the answer; null where there is none (yet). */
  answer(id: string): string | null {
    return this.answering.get(id)?.answer ?? null
  }
}
