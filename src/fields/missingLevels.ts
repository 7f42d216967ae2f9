import { virtualTemperature } from '../physics/air.ts'
import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../physics/constants.ts'
import { type FieldHeader } from './fieldHeader.ts'
import { HEIGHT, LEVEL_VALUES, TEMPERATURE, VAPOUR, WIND_EAST, WIND_NORTH } from './tiles.ts'

/** Lapse rate below the lowest level, K/m: the standard atmosphere's in the troposphere. */
export const LAPSE_BELOW = -0.0065

/**
 * Completes the levels of one point of a tile where values are missing: levels under the ground as the
 * air below a sounding, levels between others by their neighbours, linear in ln p. Levels missing above
 * all others, and points without two levels, stay missing. Vapour pressure is held below the lowest humid
 * level and is nothing above the highest.
 */
export function completePoint(tile: Float32Array, point: number, header: FieldHeader): void {
  const { levels } = header
  const at = (level: number) => (point * levels.length + level) * LEVEL_VALUES
  fillHumidity(tile, at, header)
  const whole = (level: number) => {
    const place = at(level)
    // A sum is NaN where any of its terms is.
    const sum =
      tile[place + HEIGHT] +
      tile[place + TEMPERATURE] +
      tile[place + WIND_EAST] +
      tile[place + WIND_NORTH]
    return !Number.isNaN(sum)
  }
  let lower = -1
  for (let level = 0; level < levels.length; level++) {
    if (!whole(level)) continue
    if (lower < 0)
      for (let under = level - 1; under >= 0; under--) extendDown(tile, at, levels, level, under)
    else for (let gap = lower + 1; gap < level; gap++) bridge(tile, at, levels, lower, gap, level)
    lower = level
  }
}

type Place = (level: number) => number

function fillHumidity(tile: Float32Array, at: Place, { levels, humidity }: FieldHeader): void {
  if (!humidity) return
  let lower = -1
  for (let level = 0; level < levels.length; level++) {
    const vapour = tile[at(level) + VAPOUR]
    if (!humidity.levels.includes(levels[level]) || Number.isNaN(vapour)) {
      tile[at(level) + VAPOUR] = 0
      continue
    }
    const lowerVapour = lower < 0 ? vapour : tile[at(lower) + VAPOUR]
    const lowerHeight = lower < 0 ? -Infinity : tile[at(lower) + HEIGHT]
    for (let gap = lower + 1; gap < level; gap++) {
      const share =
        (tile[at(gap) + HEIGHT] - lowerHeight) / (tile[at(level) + HEIGHT] - lowerHeight)
      const mixed = lowerVapour + (vapour - lowerVapour) * share
      tile[at(gap) + VAPOUR] = lower < 0 || Number.isNaN(mixed) ? vapour : mixed
    }
    lower = level
  }
}

/** A level under the lowest whole one: 6.5 K/km, the lowest wind, in hydrostatic balance. */
function extendDown(
  tile: Float32Array,
  at: Place,
  levels: readonly number[],
  from: number,
  to: number,
): void {
  const source = at(from)
  const target = at(to)
  const temperature = tile[source + TEMPERATURE]
  const vapour = tile[source + VAPOUR]
  const gasConstant =
    (DRY_AIR_GAS_CONSTANT * virtualTemperature(temperature, levels[from], vapour)) / temperature
  const exponent = (-gasConstant * LAPSE_BELOW) / STANDARD_GRAVITY
  const warmth = temperature * (levels[to] / levels[from]) ** exponent // US Std Atm 1976, eq. 33a, solved for T
  tile[target + TEMPERATURE] = warmth
  tile[target + HEIGHT] = tile[source + HEIGHT] + (warmth - temperature) / LAPSE_BELOW
  tile[target + VAPOUR] = (vapour * levels[to]) / levels[from]
  tile[target + WIND_EAST] = tile[source + WIND_EAST]
  tile[target + WIND_NORTH] = tile[source + WIND_NORTH]
}

function bridge(
  tile: Float32Array,
  at: Place,
  levels: readonly number[],
  lower: number,
  gap: number,
  upper: number,
): void {
  const share = Math.log(levels[gap] / levels[lower]) / Math.log(levels[upper] / levels[lower])
  for (const slot of [HEIGHT, TEMPERATURE, WIND_EAST, WIND_NORTH]) {
    const below = tile[at(lower) + slot]
    tile[at(gap) + slot] = below + (tile[at(upper) + slot] - below) * share
  }
}
