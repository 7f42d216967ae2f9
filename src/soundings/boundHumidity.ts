import { type DraftLevel } from './draftLevel.ts'
import { type Notes } from './notes.ts'

/** Vapour's largest share of the pressure: several times that of the most humid air on earth. */
export const MOST_VAPOUR = 0.2

/**
 * Vapour pressure is linear in height where pressure falls exponentially, so that over a long gap a
 * line drawn between two fair values is nonsense. Across a fall of pressure by more than this factor
 * no line is drawn.
 */
const LONGEST_GAP = 20

/** Drops humidity that no air holds, wherever the pressure is known. */
export function dropExcessVapour(levels: readonly DraftLevel[], notes: Notes): void {
  for (const level of levels) {
    const { pressure, vapourPressure } = level
    if (pressure === undefined || vapourPressure === undefined) continue
    if (vapourPressure <= MOST_VAPOUR * pressure) continue
    notes.add('humidity dropped: more vapour than any air holds', level.place)
    delete level.vapourPressure
  }
}

/** Drops humidity too far above the next below it to draw a line to. `levels` ascend. */
export function dropDistantHumidity(levels: readonly DraftLevel[], notes: Notes): void {
  let below: number | null = null
  for (const level of levels) {
    const { pressure, vapourPressure } = level
    if (pressure === undefined || vapourPressure === undefined) continue
    if (below !== null && below > LONGEST_GAP * pressure) {
      notes.add('humidity dropped: too far above the next humidity level', level.place)
      delete level.vapourPressure
    } else {
      below = pressure
    }
  }
}
