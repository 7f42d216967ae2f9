import { type JobAnswer } from '../../service/schemas/job.ts'
import { call, ServiceAway } from '../api/client.ts'

interface Follower {
  /** The job as it stands now; it has ended unless it is running */
  told: (job: JobAnswer) => void
  /** The service does not answer; it is asked again */
  away: () => void
  /** The service knows nothing of the job */
  refused: (error: unknown) => void
}

const EVENTS = ['progress', 'done', 'failed', 'cancelled', 'interrupted'] as const

/** How long after a broken stream the job is asked for, ms. */
const RETRY = 2000

/** Tells how far a job is by its server-sent events, until it ends or `stop`. */
export function followJob(id: string, stop: AbortSignal, follower: Follower): void {
  const events = new EventSource(`/v1/jobs/${id}/events`)
  const close = () => {
    events.close()
  }
  stop.addEventListener('abort', close)
  for (const kind of EVENTS) {
    events.addEventListener(kind, ({ data }: MessageEvent<string>) => {
      const job = JSON.parse(data) as JobAnswer
      if (job.state !== 'running') close()
      if (!stop.aborted) follower.told(job)
    })
  }
  // A stream that breaks is not waited for: the job is looked up until the service is back.
  events.onerror = () => {
    close()
    if (!stop.aborted) void lookUp(id, stop, follower)
  }
}

async function lookUp(id: string, stop: AbortSignal, follower: Follower): Promise<void> {
  try {
    const job = await call<JobAnswer>('GET', `/v1/jobs/${id}`, undefined, { signal: stop })
    follower.told(job)
    if (job.state === 'running') followJob(id, stop, follower)
  } catch (error) {
    if (stop.aborted) return
    if (!(error instanceof ServiceAway)) {
      follower.refused(error)
      return
    }
    follower.away()
    const timer = setTimeout(() => void lookUp(id, stop, follower), RETRY)
    stop.addEventListener('abort', () => {
      clearTimeout(timer)
    })
  }
}
