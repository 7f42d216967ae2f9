import { cursorElapsed } from '../cursor.ts'
import { momentAt } from './moment.ts'
import { type TrackRow } from './shownRun.ts'
import { readingsAt } from './words.ts'

/** What is read at the shown moment; dashes keep its place while nobody points. */
export function Readout({ track }: { track: TrackRow[] }) {
  const elapsed = cursorElapsed.value
  const readings = readingsAt(momentAt(track, elapsed ?? 0))
  return (
    <div class="readout">
      <dl>
        {readings.map(({ name, value, wide }) => (
          <div key={name} class={wide ? 'wide' : ''}>
            <dt>{name}</dt>
            <dd>{elapsed === null ? '–' : value}</dd>
          </div>
        ))}
      </dl>
      <p>
        {elapsed === null
          ? 'Point at any of the pictures, or reach one by Tab and use the arrow keys.'
          : 'Arrow keys move on; Home is the release, B the burst, End the landing.'}
      </p>
    </div>
  )
}
