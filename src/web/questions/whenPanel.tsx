import { useEffect } from 'preact/hooks'
import { type WindowsAnswer } from '../../service/schemas/windows.ts'
import { Cautions } from '../answer/cautions.tsx'
import { JobBar } from './jobBar.tsx'
import { ReleaseTime } from './releaseTime.tsx'
import { TimeStrip } from './timeStrip.tsx'
import { WhenForm } from './whenForm.tsx'
import { lookedAt, whenRequest, windows } from './whenState.ts'

/** When: release times of a span against limits. */
export function WhenPanel() {
  useEffect(() => {
    windows.resume()
  }, [])
  const { answer, answers, asked, faults } = windows.state.value
  const { request, faults: typed } = whenRequest()
  const current = JSON.stringify(request) === answers
  return (
    <div class="stack">
      <form
        class="stack"
        noValidate
        aria-label="Release times"
        onSubmit={(event) => {
          event.preventDefault()
          lookedAt.value = null
          windows.ask(request)
        }}
      >
        <WhenForm faults={[...typed, ...faults]} />
        <p>
          <button class="main" disabled={typed.length > 0 || asked !== null}>
            Try these times
          </button>
        </p>
      </form>
      <JobBar work={windows} />
      <ul class="fault" role="alert">
        {faults.map(({ path, message }) => (
          <li key={path + message}>
            {path.startsWith('/plan') && 'The plan: '}
            {message}
          </li>
        ))}
      </ul>
      {answer && (
        <section class="stack" aria-label="Release times tried">
          {!current && (
            <p class="caution">The sheet or the limits have changed since: try the times again.</p>
          )}
          <Times answer={answer} />
          <Cautions cautions={answer.cautions} label="Cautions for the times tried" />
        </section>
      )}
    </div>
  )
}

function Times({ answer }: { answer: WindowsAnswer }) {
  const { times, ranking } = answer
  const chosen = times.find(({ time }) => time === (lookedAt.value ?? ranking[0]))
  const kept = times.filter(({ passes }) => passes).length
  return (
    <>
      <p role="status">
        {kept === 0
          ? `None of ${times.length} release times keeps every limit.`
          : `${kept} of ${times.length} release times keep every limit.`}
      </p>
      <TimeStrip times={times} chosen={chosen?.time} />
      {chosen && <ReleaseTime one={chosen} />}
    </>
  )
}
