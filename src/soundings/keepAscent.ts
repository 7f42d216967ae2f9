import { geopotentialHeight } from '../physics/earth.ts'
import { standardLayers } from '../physics/standardAtmosphere.ts'
import { type Notes } from './notes.ts'
import { type ReportedLevel } from './profile.ts'

/** Levels later than the highest one are a descent where some lie this far below it, m. */
const CLEARLY_BELOW = 500

/**
 * Drops what was reported after the highest level: a sonde under its parachute measures other air
 * than it rose through. Only elapsed times tell; a sonde that was dropped keeps all its levels.
 */
export function keepAscent(levels: readonly ReportedLevel[], notes: Notes): ReportedLevel[] {
  let apex = { elapsed: 0, height: -Infinity }
  let first = Infinity
  for (const level of levels) {
    const height = heightOf(level)
    if (level.elapsed === undefined || height === undefined) continue
    first = Math.min(first, level.elapsed)
    if (height > apex.height || (height === apex.height && level.elapsed > apex.elapsed)) {
      apex = { elapsed: level.elapsed, height }
    }
  }
  if (apex.elapsed <= first) return [...levels]

  const later = (level: ReportedLevel) =>
    level.elapsed !== undefined && level.elapsed > apex.elapsed
  const falls = levels.some(
    (level) => later(level) && apex.height - (heightOf(level) ?? Infinity) > CLEARLY_BELOW,
  )
  if (!falls) return [...levels]
  return levels.filter((level) => {
    if (!later(level)) return true
    notes.add('level of the descent dropped', level.place)
    return false
  })
}

function heightOf({ geopotentialHeight: height, altitude, pressure }: ReportedLevel) {
  if (height !== undefined) return height
  if (altitude !== undefined) return geopotentialHeight(altitude)
  return pressure === undefined ? undefined : standardLayers.height(pressure)
}
