import { absorb, byFallingPressure, isBarometric, type DraftLevel } from './draftLevel.ts'
import { type Notes } from './notes.ts'

/** Levels closer than this in height, m, are one level: no report resolves less. */
const SAME_HEIGHT = 0.01

/** Two pressures that differ by less than this share were one number before a unit was changed. */
const SAME_PRESSURE = 1e-9

/** Makes one level of all that stand at one height. Those that have a height come first, ascending. */
export function mergeEqualHeights(levels: readonly DraftLevel[], notes: Notes): DraftLevel[] {
  const placed = levels
    .filter((level) => level.height !== undefined)
    .sort((a, b) => (a.height ?? 0) - (b.height ?? 0))
  const merged = mergeRuns(placed, notes, (level, next) => {
    return (next.height ?? 0) - (level.height ?? 0) < SAME_HEIGHT
  })
  return [...merged, ...levels.filter((level) => level.height === undefined)]
}

/** Makes one level of all that stand at one pressure. */
export function mergeEqualPressures(levels: readonly DraftLevel[], notes: Notes): DraftLevel[] {
  const barometric = levels.filter(isBarometric).sort(byFallingPressure)
  const merged = mergeRuns(barometric, notes, (level, next) => {
    return level.pressure - next.pressure <= SAME_PRESSURE * level.pressure
  })
  return [...merged, ...levels.filter((level) => level.pressure === undefined)]
}

function mergeRuns<L extends DraftLevel>(
  sorted: readonly L[],
  notes: Notes,
  same: (level: L, next: L) => boolean,
): L[] {
  const merged: L[] = []
  for (const next of sorted) {
    const level = merged.at(-1)
    if (!level || !same(level, next)) merged.push(next)
    else if (!absorb(level, next)) {
      notes.add('repeats another level: what both tell taken from the first', next.place)
    }
  }
  return merged
}
