import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'
import { type Fault } from '../plan/request.ts'
import { plainNumber } from '../readings.ts'
import { spreadDraft } from './dispersionState.ts'
import { emptySpread, spreadInputs } from './spreadInputs.ts'

interface SpreadTableProps {
  answer: DispersionAnswer | null
  faults: readonly Fault[]
}

/** Each thing that is uncertain: by how much, to be changed, and its part in the spread of the landings. */
export function SpreadTable({ answer, faults }: SpreadTableProps) {
  return (
    <section aria-labelledby="spread-heading">
      <h3 id="spread-heading">What the spread comes from</h3>
      <ol class="causes">
        {spreadInputs.map(({ name, label, unit, one }) => {
          const id = `sure-${name}`
          const wrong = faults.filter(({ path }) => path === `/spread/${name}`)
          const share = answer?.causes.find(({ input }) => input === name)?.varianceShare ?? 0
          const used = answer ? answer.spread[name] / one : null
          return (
            <li key={name}>
              <label for={id}>{label}</label>
              <span class="with-unit">
                <span aria-hidden="true">±</span>
                <input
                  id={id}
                  inputMode="decimal"
                  autocomplete="off"
                  value={spreadDraft.value[name]}
                  placeholder={used === null ? '' : plainNumber(used, used < 10 ? 1 : 0)}
                  aria-invalid={wrong.length > 0}
                  aria-describedby={`${id}-share${wrong.length > 0 ? ` ${id}-fault` : ''}`}
                  onInput={({ currentTarget: { value } }) => {
                    spreadDraft.value = { ...spreadDraft.value, [name]: value }
                  }}
                />
                <span class="unit">{unit}</span>
              </span>
              <span class="bar" aria-hidden="true">
                <span style={{ width: `${Math.min(1, Math.max(0, share)) * 100}%` }} />
              </span>
              <span id={`${id}-share`} class="share">
                {answer ? `${plainNumber(Math.max(0, share) * 100, 1)} %` : ''}
              </span>
              {wrong.length > 0 && (
                <span id={`${id}-fault`} class="fault">
                  {wrong.map(({ message }) => message).join('; ')}
                </span>
              )}
            </li>
          )
        })}
      </ol>
      {answer && <Remarks answer={answer} />}
      <button
        type="button"
        disabled={Object.values(spreadDraft.value).every((text) => text === '')}
        onClick={() => {
          spreadDraft.value = emptySpread
        }}
      >
        Back to the usual spreads
      </button>
    </section>
  )
}

function Remarks({ answer }: { answer: DispersionAnswer }) {
  const told = answer.causes.reduce((sum, { varianceShare }) => sum + varianceShare, 0)
  return (
    <>
      <p class="hint">
        ± is one standard deviation; 0 switches one off; left empty, the grey number is taken. The
        share is that of the scatter of the landing places
        {told < 0.99 &&
          told > 0 &&
          `; ${plainNumber((1 - told) * 100)} % come from several together`}
        .
      </p>
      <details>
        <summary>Where the usual spreads come from</summary>
        <dl>
          {spreadInputs.map(({ name, label }) => (
            <div key={name}>
              <dt>{label}</dt>
              <dd>{answer.spreadSources.find(({ input }) => input === name)?.source}</dd>
            </div>
          ))}
        </dl>
      </details>
    </>
  )
}
