import { signal, type Signal } from '@preact/signals'
import { type JobAnswer } from '../../service/schemas/job.ts'
import { call, ServiceAway, ServiceProblem } from '../api/client.ts'
import { kept } from '../kept.ts'
import { faultsOf } from '../plan/planState.ts'
import { type Fault } from '../plan/request.ts'
import { followJob } from './followJob.ts'

/** A calculation asked of the service. Requests are told apart by their JSON. */
export interface WorkState<Answer> {
  /** The newest answer; the old one stays until the new one is there */
  answer: Answer | null
  /** The request that it answers */
  answers: string | null
  /** The request that is being worked out */
  asked: string | null
  /** Where the work takes long: how far it is, or how it ended without an answer */
  job: JobAnswer | null
  /** Why there is no answer to what was asked last */
  faults: readonly Fault[]
  /** The service does not answer; it is asked again */
  away: boolean
}

/** A long calculation outlives the page: its id and the request that it works out. */
interface KeptJob {
  id: string
  request: string
}

const isKeptJob = (value: unknown): value is KeptJob | null =>
  typeof value === 'object' && value !== null && 'id' in value && 'request' in value

/** How long after an unanswered question it is asked again, ms. */
const RETRY = 2000

/** One kind of calculation: the newest question counts, whether answered at once or as a job. */
export class Work<Answer extends object> {
  readonly state: Signal<WorkState<Answer>>
  private readonly path: string
  private readonly keptJob: Signal<KeptJob | null>
  private asking = new AbortController()

  constructor(path: string) {
    this.path = path
    this.keptJob = kept<KeptJob | null>(`driftbook.job.1${path}`, null, isKeptJob)
    this.state = signal({
      answer: null,
      answers: null,
      asked: null,
      job: null,
      faults: [],
      away: false,
    })
  }

  /** Asks in place of what was asked before, `pause` ms from now. */
  ask(body: object, pause = 0): void {
    this.drop()
    const request = JSON.stringify(body)
    this.put({ asked: request, faults: [] })
    this.later(pause, (signal) => this.send(this.path, request, signal))
  }

  /** Stops asking; the old answer stays. A job under way is cancelled. */
  drop(): void {
    this.asking.abort()
    this.asking = new AbortController()
    const { job } = this.state.peek()
    if (job?.state === 'running') void this.cancel()
    this.keptJob.value = null
    this.put({ asked: null, job: null })
  }

  /** Goes on with the job that was under way when the page was left. */
  resume(): void {
    const job = this.keptJob.peek()
    if (!job || this.state.peek().asked !== null) return
    this.put({ asked: job.request })
    this.follow(job)
  }

  /** Cancels the job under way. One that has just ended is past that. */
  async cancel(): Promise<void> {
    const { job } = this.state.peek()
    if (job) await call('POST', `/v1/jobs/${job.id}/cancel`).catch(() => undefined)
  }

  /** Has a job that was interrupted or cancelled worked out again. */
  repeat(): void {
    const { job, asked } = this.state.peek()
    if (!job || asked === null) return
    this.put({ job: null })
    this.later(0, (signal) => this.send(`/v1/jobs/${job.id}/repeat`, asked, signal))
  }

  private async send(path: string, request: string, stop: AbortSignal): Promise<void> {
    try {
      const body = path === this.path ? (JSON.parse(request) as object) : undefined
      const answer = await call<Answer | JobAnswer>('POST', path, body, { signal: stop })
      if (isJob(answer)) {
        this.put({ job: answer, away: false })
        this.keptJob.value = { id: answer.id, request }
        this.follow(this.keptJob.value)
      } else {
        this.settle(answer, request)
      }
    } catch (error) {
      if (stop.aborted) return
      if (error instanceof ServiceAway) {
        this.put({ away: true })
        this.later(RETRY, (signal) => this.send(path, request, signal))
      } else {
        this.refuse(error)
      }
    }
  }

  private follow({ id, request }: KeptJob): void {
    const stop = this.asking.signal
    followJob(id, stop, {
      told: (job) => {
        this.put({ job, away: false })
        if (job.state === 'done') void this.fetchAnswer(id, request, stop)
        if (job.state === 'failed' && job.problem) this.refuse(new ServiceProblem(job.problem))
      },
      away: () => {
        this.put({ away: true })
      },
      refused: (error) => {
        this.refuse(error)
      },
    })
  }

  private async fetchAnswer(id: string, request: string, stop: AbortSignal): Promise<void> {
    try {
      const path = `/v1/jobs/${id}/answer`
      this.settle(await call<Answer>('GET', path, undefined, { signal: stop }), request)
    } catch (error) {
      if (stop.aborted) return
      if (!(error instanceof ServiceAway)) {
        this.refuse(error)
        return
      }
      this.put({ away: true })
      this.later(RETRY, () => this.fetchAnswer(id, request, stop))
    }
  }

  private settle(answer: Answer, request: string): void {
    this.keptJob.value = null
    this.put({ answer, answers: request, asked: null, job: null, faults: [], away: false })
  }

  private refuse(error: unknown): void {
    this.keptJob.value = null
    const message = error instanceof Error ? error.message : String(error)
    const faults = error instanceof ServiceProblem ? faultsOf(error) : [{ path: '', message }]
    this.put({ asked: null, job: null, faults, away: false })
  }

  private later(pause: number, act: (signal: AbortSignal) => Promise<void>): void {
    const { signal } = this.asking
    const timer = setTimeout(() => void act(signal), pause)
    signal.addEventListener('abort', () => {
      clearTimeout(timer)
    })
  }

  private put(changes: Partial<WorkState<Answer>>): void {
    this.state.value = { ...this.state.peek(), ...changes }
  }
}

function isJob(answer: object): answer is JobAnswer {
  return 'state' in answer && 'kind' in answer
}
