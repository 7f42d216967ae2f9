import { type AirState } from '../physics/air.ts'
import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../physics/constants.ts'
import { standardBreakHeights, standardLayers } from '../physics/standardAtmosphere.ts'

/**
 * Fills temperature and pressure of `out` at a geopotential height above a level: the standard
 * atmosphere's temperature shape, shifted to meet the level, in hydrostatic balance. The same as
 * `standardShapeAbove`, but it allocates nothing, for levels that differ from call to call.
 */
export function continueAbove(
  levelHeight: number,
  levelTemperature: number,
  levelPressure: number,
  height: number,
  out: AirState,
): void {
  const shift = levelTemperature - standardLayers.temperature(levelHeight)
  let bottom = levelHeight
  let bottomTemperature = levelTemperature
  let thickness = 0 // ∫ dH/T, m/K
  for (let layer = 0; layer <= standardBreakHeights.length && bottom < height; layer++) {
    const end = layer < standardBreakHeights.length ? standardBreakHeights[layer] : height
    if (end <= bottom) continue
    const top = Math.min(end, height)
    const topTemperature = standardLayers.temperature(top) + shift
    const change = topTemperature - bottomTemperature
    const ratio = change / bottomTemperature
    const stretch = Math.abs(ratio) < 1e-9 ? 1 : Math.log1p(ratio) / ratio // → 1 where isothermal
    thickness += ((top - bottom) / bottomTemperature) * stretch
    bottom = top
    bottomTemperature = topTemperature
  }
  out.temperature = bottomTemperature
  out.pressure = levelPressure * Math.exp((-STANDARD_GRAVITY / DRY_AIR_GAS_CONSTANT) * thickness) // US Std Atm 1976, eq. 33a and 33b
}
