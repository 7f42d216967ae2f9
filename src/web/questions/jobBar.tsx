import { plainNumber } from '../readings.ts'
import { type Work } from './work.ts'

/** How far a long calculation is, and what can be done about it. */
export function JobBar<Answer extends object>({ work }: { work: Work<Answer> }) {
  const { job, asked, away } = work.state.value
  return (
    <div class="job">
      <p class="fault" role="status">
        {away && 'The service does not answer. It is asked again by itself.'}
      </p>
      {job?.state === 'running' && (
        <p class="row">
          <label class="grow">
            Working it out: {plainNumber(job.progress * 100)} %
            <progress max={1} value={job.progress} />
          </label>
          <button type="button" onClick={() => void work.cancel()}>
            Stop it
          </button>
        </p>
      )}
      {(job?.state === 'interrupted' || job?.state === 'cancelled') && asked !== null && (
        <p class="row" role="status">
          <span class="grow">
            {job.state === 'interrupted'
              ? 'The service was stopped while it worked this out.'
              : 'Stopped before the end.'}
          </span>
          <button
            type="button"
            onClick={() => {
              work.repeat()
            }}
          >
            Work it out again
          </button>
        </p>
      )}
    </div>
  )
}
