import { virtualTemperature } from '../physics/air.ts'
import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../physics/constants.ts'
import { standardLayers } from '../physics/standardAtmosphere.ts'
import { MOST_VAPOUR } from './boundHumidity.ts'
import { isKnown, type DraftLevel } from './draftLevel.ts'
import { type Notes } from './notes.ts'

/**
 * Virtual temperature needs the pressure that is sought; each round brings the error down by the
 * share of vapour in the air, so that after the third it is far below a sensor's.
 */
const ROUNDS = 3

type Placed = DraftLevel & { height: number }
type Warm = Placed & { temperature: number }

/**
 * Gives levels with a temperature and a height but no pressure their pressure, by the hypsometric
 * equation with virtual temperature: from the nearest level that has one, or, between two, fitted to
 * both. Levels at one height must be one level; pressures must fall as height rises.
 */
export function completePressures(levels: readonly DraftLevel[], notes: Notes): void {
  const open = levels.filter(isWarm).filter((level) => level.pressure === undefined)
  if (open.length === 0) return
  const placed = levels
    .filter(isPlaced)
    .filter((level) => isKnown(level) || isWarm(level))
    .sort((a, b) => a.height - b.height)
  const anchors = placed.flatMap((level, index) =>
    level.pressure === undefined ? [] : [{ index, logPressure: Math.log(level.pressure) }],
  )
  if (anchors.length === 0) {
    notes.add(
      'no level tells a pressure beside its height: the lowest given that of the standard atmosphere there',
    )
    anchors.push({ index: 0, logPressure: Math.log(standardLayers.pressure(placed[0].height)) })
  }

  let logPressures: number[] | null = null
  for (let round = 0; round < ROUNDS; round++) {
    logPressures = fitToAnchors(fall(placed, logPressures), anchors)
  }
  if (!logPressures) return
  for (const [index, level] of placed.entries()) {
    if (level.pressure !== undefined) continue
    level.pressure = Math.exp(logPressures[index])
    notes.add('pressure completed with the hypsometric equation', level.place)
  }
}

/** ln p at each level less that at the lowest: d ln p = −g0·dH/(Rd·Tv), Tv linear in height. */
function fall(levels: readonly Placed[], logPressures: readonly number[] | null): number[] {
  const warm = levels.flatMap((level, index) => (isWarm(level) ? [{ level, index }] : []))
  const warmths = warm.map(({ level, index }) => {
    if (!logPressures || level.vapourPressure === undefined) return level.temperature
    const pressure = Math.exp(logPressures[index])
    const vapour = Math.min(level.vapourPressure, MOST_VAPOUR * pressure) // a first guess may be far too thin
    return virtualTemperature(level.temperature, pressure, vapour)
  })
  const heights = warm.map(({ level }) => level.height)
  const falls = [0]
  let segment = 0
  const warmthAt = (height: number): number => {
    while (segment < heights.length - 2 && heights[segment + 1] < height) segment++
    if (heights.length === 1 || height <= heights[segment]) return warmths[segment]
    const share = (height - heights[segment]) / (heights[segment + 1] - heights[segment])
    return warmths[segment] + Math.min(1, share) * (warmths[segment + 1] - warmths[segment])
  }
  let below = warmthAt(levels[0].height)
  for (let i = 1; i < levels.length; i++) {
    const here = warmthAt(levels[i].height)
    const rise = levels[i].height - levels[i - 1].height
    const mean = (below + here) / 2
    falls.push(falls[i - 1] - (STANDARD_GRAVITY * rise) / (DRY_AIR_GAS_CONSTANT * mean)) // WMO-No. 8, hypsometric equation
    below = here
  }
  return falls
}

/** The falls shifted to the nearest anchor, or, between two, stretched to meet both. */
function fitToAnchors(
  falls: readonly number[],
  anchors: readonly { index: number; logPressure: number }[],
): number[] {
  let next = 0
  return falls.map((here, index) => {
    while (next < anchors.length && anchors[next].index <= index) next++
    const lower = next > 0 ? anchors[next - 1] : anchors[0]
    const upper = anchors.at(next)
    const start = falls[lower.index]
    if (!upper || next === 0) return lower.logPressure + here - start
    const share = (here - start) / (falls[upper.index] - start)
    return lower.logPressure + share * (upper.logPressure - lower.logPressure)
  })
}

function isPlaced(level: DraftLevel): level is Placed {
  return level.height !== undefined
}

function isWarm(level: DraftLevel): level is Warm {
  return level.height !== undefined && level.temperature !== undefined
}
