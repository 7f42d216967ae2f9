import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { type Notice } from '../../service/schemas/notice.ts'
import { type Run } from '../../service/schemas/run.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { askedLevels, noticePath } from './levels.ts'
import { NoticeSheet } from './noticeSheet.tsx'
import { TrainForm } from './trainForm.tsx'
import './notice.css'

/** The notice sheet of a run with what it is made from; only the sheet is printed. */
export function NoticeView({ runId }: { runId: string }) {
  const run = useAnswer<Run>(`/v1/runs/${runId}`)
  const notice = useAnswer<Notice>(noticePath(runId, askedLevels.value))
  const flightId = run.answer?.flightId
  const flight = useAnswer<Flight>(flightId ? `/v1/flights/${flightId}` : null)
  const ready = run.answer && notice.answer && flight.answer

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
  const { flightLevels, altitudesM } = askedLevels.value
  return (
    <form
      class="row"
      aria-label="Levels on the sheet"
      onSubmit={(event) => {
        event.preventDefault()
      }}
    >
      <div class="field grow">
        <label for="flight-levels">Flight levels to list</label>
        <input
          id="flight-levels"
          value={flightLevels}
          onInput={({ currentTarget }) => {
            askedLevels.value = { ...askedLevels.value, flightLevels: currentTarget.value }
          }}
        />
      </div>
      <div class="field grow">
        <label for="altitudes">Heights to list, m above sea level</label>
        <input
          id="altitudes"
          value={altitudesM}
          onInput={({ currentTarget }) => {
            askedLevels.value = { ...askedLevels.value, altitudesM: currentTarget.value }
          }}
        />
      </div>
    </form>
  )
}
