import { type Run } from '../../service/schemas/run.ts'
import { utc } from '../parts/moment.ts'
import { reading } from '../readings.ts'
import { shiftWords } from './shiftWords.ts'

interface RunListProps {
  runs: readonly Run[]
  /** The run that is read */
  readId: string
  /** Runs drawn beside it */
  besides: ReadonlySet<string>
  onRead: (id: string) => void
  onBeside: (id: string, yes: boolean) => void
}

/** A flight's runs, newest first: one is read, others are drawn beside it. */
export function RunList({ runs, readId, besides, onRead, onBeside }: RunListProps) {
  return (
    <ol class="plain run-list">
      {runs.map(({ id, createdAt, air, burst, shift }) => (
        <li key={id}>
          <p>
            <strong>{air.name}</strong>
            {air.validAt && `, valid ${utc(air.validAt)}`}
          </p>
          <p>
            Bursts at {reading('height', burst.altitudeM)}; {shiftWords(shift)}.
          </p>
          <p class="quiet">Flown {utc(createdAt)}</p>
          <p>
            <label class="tick">
              <input
                type="radio"
                name="read-run"
                checked={id === readId}
                onChange={() => {
                  onRead(id)
                }}
              />
              Read
            </label>
            <label class="tick">
              <input
                type="checkbox"
                checked={id === readId || besides.has(id)}
                disabled={id === readId}
                onChange={({ currentTarget }) => {
                  onBeside(id, currentTarget.checked)
                }}
              />
              Draw
            </label>
          </p>
        </li>
      ))}
    </ol>
  )
}
