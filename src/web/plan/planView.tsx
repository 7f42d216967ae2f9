import { useEffect, useMemo } from 'preact/hooks'
import { lazy, Suspense } from 'preact/compat'
import { Answer } from '../answer/answer.tsx'
import { fromSite } from '../distances.ts'
import { addArea, areas } from '../questions/areas.ts'
import { dispersion } from '../questions/dispersionState.ts'
import { open, Questions } from '../questions/questions.tsx'
import { reading } from '../readings.ts'
import { newDraft } from './draft.ts'
import { FaultSummary } from './faultSummary.tsx'
import { PlanForm } from './planForm.tsx'
import { draft, keepPredicting, trialState } from './planState.ts'
import { StoreFlight } from './storeFlight.tsx'
import './plan.css'

const Pictures = lazy(() => import('../pictures/pictures.tsx').then((room) => room.Pictures))

/** The plan sheet and what comes of it. */
export function PlanView() {
  useEffect(keepPredicting, [])
  const { trial, stale } = trialState.value
  const runs = useMemo(
    () =>
      trial ? [{ key: 'plan', label: trial.air.name, run: trial, track: trial.track ?? [] }] : [],
    [trial],
  )
  return (
    <div class="desk">
      <div class="stack">
        <h1>Plan a flight</h1>
        <PlanForm />
        <button
          type="button"
          onClick={() => {
            draft.value = newDraft()
          }}
        >
          Begin a new plan
        </button>
      </div>
      <div class="stack">
        <FaultSummary />
        {!trial && <p class="waiting">Predicting …</p>}
        {trial && (
          <>
            <section class="sheet" aria-labelledby="prediction" aria-busy={stale}>
              <h2 id="prediction">
                Prediction
                {stale && <span class="stale-note"> of the plan as it was before</span>}
              </h2>
              <Answer run={trial} />
            </section>
            <StoreFlight />
            <Suspense fallback={<p class="waiting">Drawing …</p>}>
              <Pictures
                runs={runs}
                cloud={open.sure.value ? dispersion.state.value.answer : null}
                areas={areas.value}
                onAreaDrawn={(polygon) => {
                  addArea(polygon)
                  open.areas.value = true
                }}
              />
            </Suspense>
            <Questions />
            <p class="glance" aria-hidden="true">
              <span>bursts {reading('height', trial.burst.altitudeM)}</span>
              <span>lands {fromSite(trial.landing.distanceM, trial.landing.bearingDeg)}</span>
            </p>
          </>
        )}
      </div>
    </div>
  )
}
