import { problemAt, type SoundingProblem } from './badSounding.ts'
import { isKnown, type DraftLevel } from './draftLevel.ts'
import { type Notes } from './notes.ts'

/**
 * By so much, Pa, may pressure rise from one level to the next before it is held to be wrong: twice
 * the 0.1 hPa to which messages round. High up that is worth more than a balloon rises between levels.
 */
const ROUNDING = 20

/**
 * Makes pressure fall strictly from level to level: a pressure that does not fall for its rounding
 * is taken away, to be completed. Returns a problem for each that truly rises. `levels`: those with
 * a height ascend strictly in it.
 */
export function settlePressures(levels: readonly DraftLevel[], notes: Notes): SoundingProblem[] {
  const problems: SoundingProblem[] = []
  let below: { pressure: number; height: number } | null = null
  for (const level of levels.filter(isKnown)) {
    const { pressure, height } = level
    if (below === null || pressure < below.pressure) {
      below = { pressure, height }
    } else if (pressure - below.pressure <= ROUNDING) {
      notes.add('pressure not below that of the level beneath set aside', level.place)
      delete (level as DraftLevel).pressure
    } else {
      const message =
        `pressure rises with height: ${hectopascal(below.pressure)} at ${metres(below.height)}, ` +
        `${hectopascal(pressure)} above it at ${metres(height)}; ` +
        `below ${hectopascal(below.pressure)} can be flown in`
      problems.push(problemAt(level.place, message, 'pressureHPa'))
    }
  }
  return problems
}

function hectopascal(pressure: number): string {
  return `${Number((pressure / 100).toPrecision(7))} hPa`
}

function metres(height: number): string {
  return `${Number(height.toFixed(1))} m`
}
