import { effect } from '@preact/signals'
import { cursorElapsed } from '../cursor.ts'
import { burstIndex, momentAt } from './moment.ts'
import { type TrackRow } from './shownRun.ts'
import { spokenMoment } from './words.ts'

/** Arrow keys move by this share of the flight, the page keys by ten times it. */
const STEP = 1 / 200

/**
 * Makes an element a slider of the shown moment: arrows and page keys move it, Home and End go to
 * release and landing, B to the burst, Escape lets go. Returns what undoes it.
 */
export function momentKeys(
  element: HTMLElement,
  label: string,
  track: () => readonly TrackRow[],
): () => void {
  element.tabIndex = 0
  element.setAttribute('role', 'slider')
  element.setAttribute('aria-label', label)

  const onKey = (event: KeyboardEvent) => {
    if (event.altKey || event.ctrlKey || event.metaKey || event.shiftKey) return
    const moved = afterKey(event.key, track(), cursorElapsed.peek())
    if (moved === undefined) return
    event.preventDefault()
    cursorElapsed.value = moved
  }
  const onBlur = () => (cursorElapsed.value = null)
  element.addEventListener('keydown', onKey)
  element.addEventListener('blur', onBlur)
  const speak = effect(() => {
    const elapsed = cursorElapsed.value
    const rows = track()
    const last = rows[rows.length - 1].elapsedS
    element.setAttribute('aria-valuemin', '0')
    element.setAttribute('aria-valuemax', String(Math.round(last)))
    element.setAttribute('aria-valuenow', String(Math.round(elapsed ?? 0)))
    element.setAttribute(
      'aria-valuetext',
      elapsed === null ? 'no moment chosen' : spokenMoment(momentAt(rows, elapsed)),
    )
  })
  return () => {
    speak()
    element.removeEventListener('keydown', onKey)
    element.removeEventListener('blur', onBlur)
  }
}

/** The moment after a key; null lets go, undefined is no key of ours. */
function afterKey(
  key: string,
  track: readonly TrackRow[],
  elapsed: number | null,
): number | null | undefined {
  const last = track[track.length - 1].elapsedS
  const burst = track[burstIndex(track)].elapsedS
  const moved = (steps: number) => Math.min(last, Math.max(0, (elapsed ?? 0) + steps * STEP * last))
  switch (key) {
    case 'ArrowRight':
    case 'ArrowUp':
      return moved(1)
    case 'ArrowLeft':
    case 'ArrowDown':
      return moved(-1)
    case 'PageUp':
      return moved(10)
    case 'PageDown':
      return moved(-10)
    case 'Home':
      return 0
    case 'End':
      return last
    case 'b':
    case 'B':
      return burst
    case 'Escape':
      return null
    default:
      return undefined
  }
}
