import { type AirRecipe } from './airRecipe.ts'
import { type AirSource, type ColumnSource } from './airSource.ts'

/** The air of one release time, and where it comes from. */
export interface AirOfTime {
  recipe: AirRecipe
  how: 'single' | 'nearest' | 'interpolated'
  /** The air nearest in time, and for interpolated air the one on the other side */
  sources: AirSource[]
  /** How far, s, the release is from the time of the nearest air; null where that has none */
  age: number | null
}

/**
 * The air of a release at `time`, s since 1970 UTC: between two airs of different times interpolated, beyond
 * them, or where `how` is nearest, the nearest. Several airs must each have a time of their own.
 */
export function airOfTime(
  sources: readonly ColumnSource[],
  time: number,
  how: 'interpolated' | 'nearest',
): AirOfTime {
  if (sources.length === 1) {
    const [source] = sources
    const age = source.validAt === null ? null : Math.abs(time - source.validAt)
    return { recipe: source.recipe, how: 'single', sources: [source], age }
  }
  const ages = sources.map(({ validAt }) => Math.abs(time - (validAt ?? Infinity)))
  const age = Math.min(...ages)
  const nearest = sources[ages.indexOf(age)]
  const earlier = latest(sources.filter(({ validAt }) => validAt !== null && validAt <= time))
  const later = earliest(sources.filter(({ validAt }) => validAt !== null && validAt > time))
  if (how === 'nearest' || age === 0 || !earlier || !later) {
    return { recipe: nearest.recipe, how: 'nearest', sources: [nearest], age }
  }
  const share = (time - earlier.at) / (later.at - earlier.at)
  return {
    recipe: {
      kind: 'between',
      earlier: earlier.source.recipe,
      later: later.source.recipe,
      share,
    },
    how: 'interpolated',
    sources: nearest === earlier.source ? [nearest, later.source] : [nearest, earlier.source],
    age,
  }
}

interface Timed {
  source: ColumnSource
  at: number
}

function latest(sources: readonly ColumnSource[]): Timed | undefined {
  return timed(sources).at(-1)
}

function earliest(sources: readonly ColumnSource[]): Timed | undefined {
  return timed(sources).at(0)
}

function timed(sources: readonly ColumnSource[]): Timed[] {
  return sources
    .flatMap((source) => (source.validAt === null ? [] : [{ source, at: source.validAt }]))
    .sort((a, b) => a.at - b.at)
}
