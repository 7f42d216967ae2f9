import { useState } from 'preact/hooks'
import { lazy, Suspense } from 'preact/compat'
import { Link } from 'wouter-preact'
import { type Flight } from '../../service/schemas/flight.ts'
import { type Run } from '../../service/schemas/run.ts'
import { Answer } from '../answer/answer.tsx'
import { useAnswer } from '../api/useAnswer.ts'
import { Fault } from '../parts/fault.tsx'
import { utc } from '../parts/moment.ts'
import { Downloads } from './downloads.tsx'
import { FlightTools } from './flightTools.tsx'
import { FlyOneAgain } from './flyOneAgain.tsx'
import { OutcomeForm } from './outcomeForm.tsx'
import { PlanInShort } from './planInShort.tsx'
import { RunList } from './runList.tsx'
import { useShownRuns } from './useShownRuns.ts'
import { WatchSheet } from './watchSheet.tsx'
import './book.css'

const Pictures = lazy(() => import('../pictures/pictures.tsx').then((room) => room.Pictures))

/** One stored flight: its plan, its runs and how they shifted, what became of it. */
export function FlightView({ flightId }: { flightId: string }) {
  const flight = useAnswer<Flight>(`/v1/flights/${flightId}`)
  const runs = useAnswer<{ items: Run[] }>(`/v1/flights/${flightId}/runs?limit=200`)
  const [readId, setReadId] = useState<string | null>(null)
  const [besides, setBesides] = useState<ReadonlySet<string>>(new Set())

  const all = runs.answer?.items ?? []
  const read = all.find(({ id }) => id === readId) ?? all.at(0)
  const shown = useShownRuns(
    all.filter(({ id }) => id === read?.id || besides.has(id)),
    read?.id,
  )
  const renew = () => {
    flight.renew()
    runs.renew()
  }
  if (!flight.answer) {
    return flight.error ? <Fault error={flight.error} /> : <p class="waiting">Opening …</p>
  }
  const { title, plan, outcome } = flight.answer
  return (
    <div class="stack">
      <div>
        <p>
          <Link href="/book">Book</Link>
        </p>
        <h1>{title}</h1>
        <p class="quiet">Release {utc(plan.launch.time)}</p>
        <FlightTools flight={flight.answer} onChanged={renew} />
      </div>
      <div class="flight-columns">
        <div class="stack">
          <section class="sheet" aria-labelledby="runs">
            <h2 id="runs">Runs</h2>
            <RunList
              runs={all}
              readId={read?.id ?? ''}
              besides={besides}
              onRead={setReadId}
              onBeside={(id, yes) => {
                const changed = new Set(besides)
                if (yes) changed.add(id)
                else changed.delete(id)
                setBesides(changed)
              }}
            />
            <FlyOneAgain
              flightId={flightId}
              onFlown={(run) => {
                setReadId(run.id)
                if (read) setBesides(new Set([...besides, read.id]))
                renew()
              }}
            />
          </section>
          <WatchSheet flightId={flightId} onEvent={renew} />
          <PlanInShort plan={plan} />
          <OutcomeForm flightId={flightId} outcome={outcome} runs={all} onKept={renew} />
        </div>
        <div class="stack">
          {read && (
            <section class="sheet stack" aria-labelledby="read">
              <h2 id="read">
                The run of {utc(read.createdAt)} in {read.air.name}
              </h2>
              <Answer run={read} />
              <Downloads runId={read.id} />
            </section>
          )}
          {shown.length > 0 && (
            <Suspense fallback={<p class="waiting">Drawing …</p>}>
              <Pictures runs={shown} />
            </Suspense>
          )}
        </div>
      </div>
    </div>
  )
}
