import { useState } from 'preact/hooks'
import { Link } from 'wouter-preact'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { AirChoice } from '../parts/airChoice.tsx'
import { Fault } from '../parts/fault.tsx'
import { useRepeatKey } from './repeatKey.ts'
import { useRerunAir } from './rerunAir.ts'
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
  const [air, setAir] = useRerunAir()
  const request = { air, flightIds }
  const { key, spend } = useRepeatKey(JSON.stringify(request))
  const [flown, setFlown] = useState<RerunAnswer | null>(null)
  const [error, setError] = useState<Error | null>(null)
  const [busy, setBusy] = useState(false)

  const fly = async () => {
    setBusy(true)
    setError(null)
    try {
      const headers = { 'idempotency-key': key }
      setFlown(await call<RerunAnswer>('POST', '/v1/reruns', request, { headers }))
      spend()
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
          {air && <AirChoice id="again-air" air={air} onChoose={setAir} />}
        </div>
        <button
          type="button"
          class="main"
          disabled={busy || !air || flightIds.length === 0}
          onClick={() => void fly()}
        >
          {busy ? 'Flying …' : buttonWords(flightIds.length)}
        </button>
      </div>
      {flightIds.length === 0 && !flown && (
        <p class="quiet">Tick the flights below that are to be flown again.</p>
      )}
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

function buttonWords(count: number): string {
  if (count === 0) return 'Fly again'
  return count === 1 ? 'Fly 1 flight again' : `Fly ${count} flights again`
}
