import { type z } from 'zod'
import { type levelAnswerSchema } from '../../service/schemas/profile.ts'
import { burstIndex, windBetween } from './moment.ts'
import { type TrackRow } from './shownRun.ts'

export type Level = z.output<typeof levelAnswerSchema>

/** The wind at a height, m above mean sea level. */
export interface WindAt {
  altitudeM: number
  windFromDeg: number
  windSpeedMs: number
}

/** A span of heights where the wind is no observation but a level's wind held. */
export interface HeldSpan {
  bottom: number
  top: number
  which: 'above' | 'below'
}

/** The wind from one height to another. */
export interface WindColumn {
  /** Ascending, so dense that straight lines between them tell the wind */
  winds: WindAt[]
  /** Heights at which the sounding has wind, m */
  levels: number[]
  held: HeldSpan[]
}

/** Between levels the speed bends, since the components are straight: it is drawn so finely, m. */
const STEP = 200

/** The wind as the balloon met it on its way up. */
export function windOfAscent(track: readonly TrackRow[]): WindColumn {
  return { winds: track.slice(0, burstIndex(track) + 1), levels: [], held: [] }
}

/** The wind of a sounding from `bottom` to `top`, m; the lowest and highest level's wind held beyond. */
export function windOfLevels(
  levels: readonly Level[],
  bottom: number,
  top: number,
): WindColumn | null {
  const observed = levels.flatMap(({ altitudeM, windFromDeg, windSpeedMs }): WindAt[] =>
    windFromDeg === undefined || windSpeedMs === undefined
      ? []
      : [{ altitudeM, windFromDeg, windSpeedMs }],
  )
  const [lowest, highest] = [observed.at(0), observed.at(-1)]
  if (!lowest || !highest) return null
  const held: HeldSpan[] = []
  if (lowest.altitudeM > bottom + 1) {
    held.push({ bottom, top: Math.min(lowest.altitudeM, top), which: 'below' })
  }
  if (highest.altitudeM < top - 1) {
    held.push({ bottom: Math.max(highest.altitudeM, bottom), top, which: 'above' })
  }
  const inside = observed.filter(({ altitudeM }) => altitudeM >= bottom && altitudeM <= top)
  const winds = dense([
    { ...windIn(observed, bottom), altitudeM: bottom },
    ...inside.filter(({ altitudeM }) => altitudeM > bottom && altitudeM < top),
    { ...windIn(observed, top), altitudeM: top },
  ])
  return { winds, levels: inside.map(({ altitudeM }) => altitudeM), held }
}

/** The wind of a column at a height; the nearest end's beyond it. */
export function windIn(winds: readonly WindAt[], altitude: number): WindAt {
  const next = winds.findIndex(({ altitudeM }) => altitudeM > altitude)
  if (next === 0) return winds[0]
  if (next < 0) return winds[winds.length - 1]
  const [from, to] = [winds[next - 1], winds[next]]
  const share = (altitude - from.altitudeM) / (to.altitudeM - from.altitudeM)
  return { altitudeM: altitude, ...windBetween(from, to, share) }
}

function dense(winds: readonly WindAt[]): WindAt[] {
  return winds.flatMap((wind, index) => {
    if (index === 0) return [wind]
    const before = winds[index - 1]
    const pieces = Math.ceil((wind.altitudeM - before.altitudeM) / STEP)
    return Array.from({ length: pieces }, (_, piece) => {
      const share = (piece + 1) / pieces
      const altitudeM = before.altitudeM + (wind.altitudeM - before.altitudeM) * share
      return { altitudeM, ...windBetween(before, wind, share) }
    })
  })
}
