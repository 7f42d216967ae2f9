import { useState } from 'preact/hooks'
import { type Miss, type Outcome } from '../../service/schemas/flight.ts'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { Fault } from '../parts/fault.tsx'
import { utc } from '../parts/moment.ts'
import { reading } from '../readings.ts'
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
      await call('PUT', path, outcomeOf(shown))
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
      {answer && (
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

function missWords(miss: Miss): string {
  const { landingDistanceM, landingBearingDeg, landingTimeS, burstAltitudeM } = miss
  const parts: string[] = []
  if (landingDistanceM !== null) {
    const point = compassPoint(landingBearingDeg ?? 0)
    parts.push(`landed ${distanceWords(landingDistanceM)} ${point} of the prediction`)
  }
  if (landingTimeS !== null) {
    const side = landingTimeS > 0 ? 'later' : 'earlier'
    parts.push(`${durationWords(Math.abs(landingTimeS))} ${side}`)
  }
  if (burstAltitudeM !== null) {
    const side = burstAltitudeM > 0 ? 'higher' : 'lower'
    parts.push(`burst ${reading('height', Math.abs(burstAltitudeM))} ${side}`)
  }
  return parts.join(', ') || 'nothing to compare it with yet'
}
