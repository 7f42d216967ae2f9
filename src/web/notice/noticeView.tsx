import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { type Notice } from '../../service/schemas/notice.ts'
import { type Run } from '../../service/schemas/run.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { askedLevels, DEFAULT_LEVELS, noticePath, type AskedLevels } from './levels.ts'
import { NoticeSheet } from './noticeSheet.tsx'
import { TrainForm } from './trainForm.tsx'
import './notice.css'

/** The notice sheet of a run with what it is made from; only the sheet is printed. */
export function NoticeView({ runId }: { runId: string }) {
  const run = useAnswer<Run>(`/v1/runs/${runId}`)
  const notice = useAnswer<Notice>(noticePath(runId, askedLevels.value))
  const flightId = run.answer?.flightId
  const flight = useAnswer<Flight>(flightId ? `/v1/flights/${flightId}` : null)
  const ready = run.answer && notice.answer && flight.answer && !notice.error

  return (
    <div class="stack">
      <div class="screen-only stack">
        <p>{flightId && <Link href={`/book/${flightId}`}>Back to the flight</Link>}</p>
        <LevelsForm />
        {flight.answer && notice.answer && (
          <TrainForm
            key={flight.answer.updatedAt}
            flight={flight.answer}
            missing={notice.answer.balloonClass.missing.length > 0}
            onKept={() => {
              flight.renew()
              notice.renew()
            }}
          />
        )}
        <Fault error={run.error ?? notice.error ?? flight.error} />
        <p>
          <button
            type="button"
            class="main"
            disabled={!ready}
            onClick={() => {
              print()
            }}
          >
            Print the sheet
          </button>
        </p>
      </div>
      {run.answer && notice.answer && flight.answer && (
        <NoticeSheet run={run.answer} notice={notice.answer} plan={flight.answer.plan} />
      )}
    </div>
  )
}

function LevelsForm() {
  return (
    <form
      class="row"
      aria-label="Levels on the sheet"
      onSubmit={(event) => {
        event.preventDefault()
      }}
    >
      <Levels name="flightLevels" label="Flight levels to list, hundreds of feet" />
      <Levels name="altitudesM" label="Heights to list, m above sea level" />
      <button type="button" onClick={() => (askedLevels.value = DEFAULT_LEVELS)}>
        Usual levels
      </button>
    </form>
  )
}

function Levels({ name, label }: { name: keyof AskedLevels; label: string }) {
  return (
    <div class="field grow">
      <label for={`list-${name}`}>{label}</label>
      <input
        id={`list-${name}`}
        value={askedLevels.value[name]}
        onInput={({ currentTarget }) => {
          askedLevels.value = { ...askedLevels.value, [name]: currentTarget.value }
        }}
      />
    </div>
  )
}
