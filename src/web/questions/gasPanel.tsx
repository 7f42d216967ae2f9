import { useEffect } from 'preact/hooks'
import { type FillAnswer } from '../../service/schemas/fill.ts'
import { durationWords } from '../distances.ts'
import { Choice } from '../plan/choice.tsx'
import { Field } from '../plan/field.tsx'
import { change, draft } from '../plan/planState.ts'
import { plainNumber, reading } from '../readings.ts'
import { gas, gasDraft, gasRequest, keepFilling, TARGETS, type GasDraft } from './gasState.ts'
import { JobBar } from './jobBar.tsx'
import { TradeOff } from './tradeOff.tsx'
import { WeighingNote } from './weighingNote.tsx'

/** How much gas: the neck lift that reaches what is wanted of the plan on the sheet. */
export function GasPanel() {
  useEffect(keepFilling, [])
  const { answer, answers, faults: refused } = gas.state.value
  const { request, faults: typed, planFaults } = gasRequest()
  const current = JSON.stringify(request) === answers && refused.length === 0
  const faults = [...typed, ...refused]
  const { target, values } = gasDraft.value
  const wanted = TARGETS.find(({ member }) => member === target) ?? TARGETS[0]
  const elsewhere = [...planFaults, ...refused.filter(({ path }) => !isOwn(path))]
  return (
    <div class="stack">
      <div class="pair">
        <Choice
          id="gas-target"
          label="Fill for a wanted"
          value={target}
          options={TARGETS.map(({ member, label }) => [member, label])}
          onChoose={(chosen) => {
            put({ target: chosen })
          }}
        />
        <Field
          path={`/target/${target}`}
          label={`Wanted ${wanted.label}`}
          unit={wanted.unit}
          value={values[target]}
          faults={faults}
          onType={(value) => {
            put({ values: { ...values, [target]: value } })
          }}
        />
      </div>
      <details>
        <summary>Cylinders and weighing</summary>
        <Details faults={faults} />
      </details>
      <JobBar work={gas} />
      {elsewhere.length > 0 && (
        <p class="fault" role="alert">
          The plan has to be put right first: {elsewhere.map(({ message }) => message).join('; ')}
        </p>
      )}
      {answer && (
        <section class="stack" aria-label="The fill" aria-busy={!current}>
          {!current && <p class="stale-note">Of what was asked before.</p>}
          <Fill answer={answer} />
          <WeighingNote answer={answer} />
          <TradeOff answer={answer} />
        </section>
      )}
    </div>
  )
}

function put(changes: Partial<GasDraft>): void {
  gasDraft.value = { ...gasDraft.value, ...changes }
}

function isOwn(path: string): boolean {
  return /^\/(target|cylinder|weighing)/.test(path)
}

const DETAILS = [
  ['waterVolumeL', '/cylinder/waterVolumeL', 'A cylinder holds', 'L', 'litres of water'],
  ['pressureBar', '/cylinder/pressureBar', 'Filled to', 'bar', 'absolute'],
  ['temperatureC', '/cylinder/temperatureC', 'Cylinder at', '°C', undefined],
  ['leaveBar', '/cylinder/leaveBar', 'Taken off at', 'bar', 'what stays in it'],
  ['hallC', '/weighing/airTemperatureC', 'Weighed in air of', '°C', 'where not at the site'],
  ['gasC', '/weighing/gasTemperatureC', 'Gas then at', '°C', 'the air’s where left empty'],
] as const

function Details({ faults }: { faults: { path: string; message: string }[] }) {
  return (
    <div class="pair">
      {DETAILS.map(([name, path, label, unit, hint]) => (
        <Field
          key={name}
          path={path}
          label={label}
          unit={unit}
          {...(hint && { hint })}
          value={gasDraft.value[name]}
          faults={faults}
          onType={(value) => {
            put({ [name]: value })
          }}
        />
      ))}
    </div>
  )
}

function Fill({ answer }: { answer: FillAnswer }) {
  const { neckLiftG, fill, ascent, burst, landing, cylinders } = answer
  const grams = String(Math.round(neckLiftG))
  const taken = draft.value.neckLiftG === grams
  return (
    <>
      <p class="row">
        <span>
          A neck lift of <strong>{plainNumber(neckLiftG)} g</strong>:{' '}
          {plainNumber(fill.volumeM3, 2)} m³, {reading('verticalSpeed', ascent.releaseRateMs, 1)} at
          release, {reading('verticalSpeed', ascent.meanRateMs, 1)} on average, burst at{' '}
          {reading('height', burst.altitudeM)}, on the ground after{' '}
          {durationWords(landing.elapsedS)}.
        </span>
        <button
          type="button"
          class="main"
          disabled={taken}
          onClick={() => {
            change({ neckLiftG: grams })
          }}
        >
          {taken
            ? `${plainNumber(neckLiftG)} g is on the sheet`
            : `Take ${plainNumber(neckLiftG)} g`}
        </button>
      </p>
      {cylinders && (
        <p>
          {cylinders.count === 1 ? 'One cylinder is' : `${cylinders.count} cylinders are`} enough;
          the last one is left with {plainNumber(cylinders.lastLeftBar)} bar. Each gives{' '}
          {plainNumber(cylinders.gasPerCylinderKg, 2)} kg, as a real gas.
        </p>
      )}
    </>
  )
}
