import { useState } from 'preact/hooks'
import { type Run } from '../../service/schemas/run.ts'
import { call } from '../api/client.ts'
import { AirChoice } from '../parts/airChoice.tsx'
import { Fault } from '../parts/fault.tsx'
import { useRepeatKey } from './repeatKey.ts'
import { useRerunAir } from './rerunAir.ts'
import { shiftWords } from './shiftWords.ts'

/** Flies the stored plan again in other air. */
export function FlyOneAgain(props: { flightId: string; onFlown: (run: Run) => void }) {
  const path = `/v1/flights/${props.flightId}/runs`
  const [air, setAir] = useRerunAir()
  const { key, spend } = useRepeatKey(path + JSON.stringify(air))
  const [error, setError] = useState<Error | null>(null)
  const [flown, setFlown] = useState<Run | null>(null)
  const fly = async () => {
    setError(null)
    try {
      const headers = { 'idempotency-key': key }
      const run = await call<Run>('POST', path, { air }, { headers })
      spend()
      setFlown(run)
      props.onFlown(run)
    } catch (failure) {
      setError(failure as Error)
    }
  }
  return (
    <form
      class="stack"
      aria-label="Fly again"
      onSubmit={(event) => {
        event.preventDefault()
        void fly()
      }}
    >
      <div class="row">
        <div class="field">
          <label for="one-air">Fly it again in</label>
          {air && <AirChoice id="one-air" air={air} onChoose={setAir} />}
        </div>
        <button class="main" disabled={!air}>
          Fly again
        </button>
      </div>
      <Fault error={error} />
      <p role="status">{flown && `The new run ${shiftWords(flown.shift)}.`}</p>
    </form>
  )
}
