import { v7 as uuid } from 'uuid'
import { useState } from 'preact/hooks'
import { Link } from 'wouter-preact'
import { type AirReference } from '../../service/schemas/plan.ts'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { AirChoice } from '../parts/airChoice.tsx'
import { Fault } from '../parts/fault.tsx'
import { shiftWords } from './shiftWords.ts'

interface RerunAnswer {
  count: number
  shifts: { flightId: string; title: string; runId: string; shift: NonNullable<Run['shift']> }[]
}

interface FlyAgainProps {
  flightIds: string[]
  onFlown: () => void
}

/** Flies the chosen flights again in one other air, and tells how far each landing moved. */
export function FlyAgain({ flightIds, onFlown }: FlyAgainProps) {
  const [air, setAir] = useState<AirReference>({ kind: 'standard' })
  const [flown, setFlown] = useState<RerunAnswer | null>(null)
  const [error, setError] = useState<Error | null>(null)
  const [busy, setBusy] = useState(false)

  const fly = async () => {
    setBusy(true)
    setError(null)
    try {
      setFlown(
        await call<RerunAnswer>(
          'POST',
          '/v1/reruns',
          { air, flightIds },
          {
            headers: { 'idempotency-key': uuid() },
          },
        ),
      )
      onFlown()
    } catch (failure) {
      setError(failure as Error)
    }
    setBusy(false)
  }

  return (
    <section class="sheet stack" aria-labelledby="fly-again">
      <h2 id="fly-again">Fly the chosen flights again</h2>
      <div class="row">
        <div class="field">
          <label for="again-air">in this air</label>
          <AirChoice id="again-air" air={air} onChoose={setAir} />
        </div>
        <button
          type="button"
          class="main"
          disabled={busy || flightIds.length === 0}
          onClick={() => void fly()}
        >
          {flightIds.length === 1 ? 'Fly 1 flight again' : `Fly ${flightIds.length} flights again`}
        </button>
      </div>
      <Fault error={error} />
      <div role="status">
        {flown && (
          <>
            <p>
              {flown.count === 1 ? '1 new run is stored' : `${flown.count} new runs are stored`},
              the farthest moved landing first:
            </p>
            <ol>
              {flown.shifts.map(({ flightId, title, runId, shift }) => (
                <li key={runId}>
                  <Link href={`/book/${flightId}`}>{title}</Link> {shiftWords(shift)}.
                </li>
              ))}
            </ol>
          </>
        )}
      </div>
    </section>
  )
}
