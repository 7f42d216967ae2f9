import { runToken } from './ink.ts'
import { marks, type Mark } from './marks.ts'
import { type ShownRun } from './shownRun.ts'

/** A symbol as the charts and the map draw it. */
export function MarkSign({ mark }: { mark: Mark }) {
  return (
    <svg class="mark" viewBox="-10 -10 20 20" aria-hidden="true">
      <path d={marks[mark]} />
    </svg>
  )
}

/** What the lines and symbols mean, and which run has which number. */
export function Legend({ runs }: { runs: ShownRun[] }) {
  return (
    <div class="legend">
      <ul>
        <li>
          <Line token="--ascent" /> ascent
        </li>
        <li>
          <Line token="--descent" dashed /> descent
        </li>
        {(['release', 'burst', 'landing'] as const).map((mark) => (
          <li key={mark}>
            <MarkSign mark={mark} /> {mark}
          </li>
        ))}
      </ul>
      {runs.length > 1 && (
        <ol>
          {runs.map(({ key, label }, index) => (
            <li key={key}>
              <Line token={runToken(index, 'ascent')} /> {label}
            </li>
          ))}
        </ol>
      )}
    </div>
  )
}

function Line({ token, dashed = false }: { token: string; dashed?: boolean }) {
  return (
    <svg class="line" viewBox="0 0 28 8" aria-hidden="true" style={{ stroke: `var(${token})` }}>
      <path d="M1 4H27" {...(dashed ? { 'stroke-dasharray': '6 4' } : {})} />
    </svg>
  )
}
