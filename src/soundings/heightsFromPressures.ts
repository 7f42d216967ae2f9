import { virtualTemperature } from '../physics/air.ts'
import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../physics/constants.ts'
import { standardLayers } from '../physics/standardAtmosphere.ts'
import {
  byFallingPressure,
  isBarometric,
  isKnown,
  isThermal,
  type DraftLevel,
  type Known,
  type Thermal,
} from './draftLevel.ts'
import { type Notes } from './notes.ts'

/**
 * Gives levels with a temperature and a pressure but no height their height, by the hypsometric
 * equation with virtual temperature: from the nearest level that has one, or, between two, fitted to
 * both. No two levels may have the same pressure, and heights must rise as pressure falls.
 */
export function completeThermalHeights(levels: readonly DraftLevel[], notes: Notes): void {
  const thermal = levels.filter(isThermal).sort(byFallingPressure)
  const open = thermal.filter((level) => level.height === undefined)
  if (open.length === 0) return
  const thickness = thicknessOver(thermal)
  const known = levels.filter(isKnown).sort(byFallingPressure)
  if (known.length === 0) known.push(standInStandardAtmosphere(thermal[0], notes))

  let next = 0
  for (const level of open) {
    while (next < known.length && known[next].pressure > level.pressure) next++
    const lower = known.at(next - 1)
    const upper = known.at(next)
    const rise = thickness(level.pressure)
    if (next > 0 && lower && upper) {
      const bottom = thickness(lower.pressure)
      const share = (rise - bottom) / (thickness(upper.pressure) - bottom)
      level.height = lower.height + share * (upper.height - lower.height)
    } else {
      const nearest = upper ?? lower
      if (nearest) level.height = nearest.height + rise - thickness(nearest.pressure)
    }
    notes.add('height completed with the hypsometric equation', level.place)
  }
}

/**
 * Gives levels without a temperature, with a pressure but no height, their height: linear in ln p
 * between the nearest levels that have both, as thick as the standard atmosphere beyond them.
 */
export function interpolateHeights(levels: readonly DraftLevel[], notes: Notes): void {
  const open = levels
    .filter(isBarometric)
    .filter((level) => level.height === undefined)
    .sort(byFallingPressure)
  if (open.length === 0) return
  const known = levels.filter(isKnown).sort(byFallingPressure)
  if (known.length === 0) known.push(standInStandardAtmosphere(open[0], notes))

  let next = 0
  for (const level of open) {
    while (next < known.length && known[next].pressure > level.pressure) next++
    const lower = known.at(next - 1)
    const upper = known.at(next)
    if (next > 0 && lower && upper) {
      const share =
        Math.log(lower.pressure / level.pressure) / Math.log(lower.pressure / upper.pressure)
      level.height = lower.height + share * (upper.height - lower.height)
      notes.add('height interpolated in ln p between the neighbouring levels', level.place)
    } else {
      const nearest = upper ?? lower
      if (!nearest) continue
      const thickness =
        standardLayers.height(level.pressure) - standardLayers.height(nearest.pressure)
      level.height = nearest.height + thickness
      notes.add('height completed with the thickness of the standard atmosphere', level.place)
    }
  }
}

function standInStandardAtmosphere(level: DraftLevel & { pressure: number }, notes: Notes): Known {
  notes.add(
    'no level tells a height beside its pressure: the lowest put where the standard atmosphere has its pressure',
  )
  return { ...level, height: standardLayers.height(level.pressure) }
}

/**
 * Geopotential m between the lowest of `thermal` and a pressure in Pa, virtual temperature linear in
 * ln p between levels and held beyond them: dH = −(Rd/g0)·Tv·d ln p (WMO-No. 8, hypsometric equation).
 */
function thicknessOver(thermal: readonly Thermal[]): (pressure: number) => number {
  const scale = DRY_AIR_GAS_CONSTANT / STANDARD_GRAVITY
  const depths = thermal.map((level) => -Math.log(level.pressure))
  const warmths = thermal.map((level) =>
    virtualTemperature(level.temperature, level.pressure, level.vapourPressure ?? 0),
  )
  const rises = [0]
  for (let i = 1; i < depths.length; i++) {
    const mean = (warmths[i - 1] + warmths[i]) / 2
    rises.push(rises[i - 1] + scale * mean * (depths[i] - depths[i - 1]))
  }
  const last = depths.length - 1

  return (pressure) => {
    const depth = -Math.log(pressure)
    if (depth <= depths[0]) return scale * warmths[0] * (depth - depths[0])
    if (depth >= depths[last]) return rises[last] + scale * warmths[last] * (depth - depths[last])
    let low = 0
    let high = last
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (depths[middle] <= depth) low = middle
      else high = middle
    }
    const share = (depth - depths[low]) / (depths[high] - depths[low])
    const mean = warmths[low] + ((warmths[high] - warmths[low]) * share) / 2
    return rises[low] + scale * mean * (depth - depths[low])
  }
}
