import { useState } from 'preact/hooks'
import { type Miss, type Outcome } from '../../service/schemas/flight.ts'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { utc } from '../parts/moment.ts'
import { missWords } from './missWords.ts'
import { emptyDraft, outcomeOf, OUTCOME_FIELDS, type OutcomeDraft } from './outcomeDraft.ts'

interface OutcomeFormProps {
  flightId: string
  outcome: Outcome | null
  runs: readonly Run[]
  onKept: () => void
}

/** What was observed, entered after the flight, and how far each run was off it. */
export function OutcomeForm({ flightId, outcome, runs, onKept }: OutcomeFormProps) {
  const [draft, setDraft] = useState<OutcomeDraft | null>(null)
  const [error, setError] = useState<Error | null>(null)
  const path = `/v1/flights/${flightId}/outcome`
  const { answer, renew } = useAnswer<{ misses: Miss[] }>(outcome ? path : null)
  const shown = draft ?? emptyDraft(outcome)

  const keep = async () => {
    setError(null)
    try {
      const observed = outcomeOf(shown)
      if (Object.keys(observed).length > 0) await call('PUT', path, observed)
      else if (outcome) await call('DELETE', path)
      setDraft(null)
      renew()
      onKept()
    } catch (failure) {
      setError(failure as Error)
    }
  }

  return (
    <details class="sheet" open={outcome !== null}>
      <summary>What happened</summary>
      <form
        class="stack"
        onSubmit={(event) => {
          event.preventDefault()
          void keep()
        }}
      >
        {OUTCOME_FIELDS.map(({ name, label, type }) => (
          <div class="field" key={name}>
            <label for={`outcome-${name}`}>{label}</label>
            <input
              id={`outcome-${name}`}
              type={type}
              step="any"
              value={shown[name]}
              onInput={({ currentTarget }) => {
                setDraft({ ...shown, [name]: currentTarget.value })
              }}
            />
          </div>
        ))}
        <Fault error={error} />
        <div class="row">
          <button>Keep what happened</button>
        </div>
      </form>
      {outcome && answer && (
        <ul>
          {answer.misses.map((miss) => (
            <li key={miss.runId}>
              {runName(runs.find(({ id }) => id === miss.runId))}: {missWords(miss)}
            </li>
          ))}
        </ul>
      )}
    </details>
  )
}

function runName(run: Run | undefined): string {
  return run ? `Run of ${utc(run.createdAt)} in ${run.air.name}` : 'An older run'
}
