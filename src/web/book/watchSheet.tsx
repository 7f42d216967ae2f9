import { useState } from 'preact/hooks'
import { type Watch } from '../../service/schemas/watch.ts'
import { call, ServiceProblem } from '../api/client.ts'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { utc } from '../parts/moment.ts'
import { unitOf } from '../readings.ts'
import { eventWords } from './eventWords.ts'
import { useEvents } from './useEvents.ts'

/** Metres that a landing may move before it is worth a word. */
const USUAL_M = 5000

/** Whether the service flies a flight again by itself in better air, and what came of it. */
export function WatchSheet({ flightId, onEvent }: { flightId: string; onEvent: () => void }) {
  const path = `/v1/flights/${flightId}/watch`
  const { answer, error, renew } = useAnswer<Watch>(path)
  const notWatched = error instanceof ServiceProblem && error.status === 404
  const watch = notWatched ? null : answer
  const events = useEvents(flightId, watch !== null, onEvent)
  const told = events.filter((event) => event.kind !== 'run-stored')
  const webhook = watch?.webhook ?? null
  const [typed, setTyped] = useState<string | null>(null)
  const [failure, setFailure] = useState<Error | null>(null)
  const { symbol, one } = unitOf('distance')
  const distance = typed ?? String(Number(((watch?.tellBeyondM ?? USUAL_M) / one).toFixed(1)))

  const attempt = async (work: () => Promise<unknown>) => {
    setFailure(null)
    try {
      await work()
      setTyped(null)
      renew()
    } catch (refusal) {
      setFailure(refusal as Error)
    }
  }
  const keep = () =>
    attempt(() => {
      const tellBeyondM = Number(distance.replace(',', '.')) * one
      // What somebody set through the API stays; a webhook cannot, its secret is never answered.
      const near = watch ? { withinM: watch.withinM, withinS: watch.withinS } : {}
      return call('PUT', path, { ...near, tellBeyondM })
    })

  return (
    <section class="sheet stack" aria-labelledby="watch">
      <h2 id="watch">Keep it current</h2>
      <p role="status">
        {watch
          ? 'Watched: it is flown again by itself whenever a nearer or newer sounding is stored, until it has landed.'
          : 'Not watched: it is flown again only by hand.'}
      </p>
      <form
        class="row"
        aria-label="Watch the flight"
        onSubmit={(event) => {
          event.preventDefault()
          void keep()
        }}
      >
        <div class="field">
          <label for="tell-beyond">Tell where the landing moves more than, {symbol}</label>
          <input
            id="tell-beyond"
            inputMode="decimal"
            value={distance}
            disabled={webhook !== null}
            onInput={({ currentTarget }) => {
              setTyped(currentTarget.value)
            }}
          />
        </div>
        {!webhook && <button>{watch ? 'Keep the distance' : 'Watch it'}</button>}
        {watch && (
          <button type="button" onClick={() => void attempt(() => call('DELETE', path))}>
            Watch it no longer
          </button>
        )}
      </form>
      {webhook && <p>Events are posted to {webhook.url}: change the distance there.</p>}
      <Fault error={failure ?? (notWatched ? null : error)} />
      {told.length > 0 && (
        <ol class="plain stack" aria-label="What happened to the prediction, newest first">
          {told.map((event) => (
            <li key={event.id}>
              <p class="caution">
                {utc(event.at)}: {eventWords(event)}
              </p>
            </li>
          ))}
        </ol>
      )}
    </section>
  )
}
