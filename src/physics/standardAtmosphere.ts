import { airDensity, viscosity, type AirState, type ColumnAir } from './air.ts'
import { DRY_AIR_GAS_CONSTANT } from './constants.ts'
import { geometricAltitude, geopotentialHeight } from './earth.ts'
import { HydrostaticLayers } from './hydrostaticLayers.ts'

/** Base geopotential heights, m, and lapse rates, K/m, of the layers. US Std Atm 1976, table 4. */
const LAYERS = [
  [0, -0.0065],
  [11_000, 0],
  [20_000, 0.001],
  [32_000, 0.0028],
  [47_000, 0],
  [51_000, -0.0028],
  [71_000, -0.002],
] as const

/** The US Standard Atmosphere 1976 below 71 km; sea level 288.15 K and 101 325 Pa. */
export const standardLayers = new HydrostaticLayers(
  LAYERS.map(([height]) => height),
  LAYERS.map(([, lapse]) => lapse),
  288.15,
  101_325,
  DRY_AIR_GAS_CONSTANT,
)

/** Geopotential heights, m, where the standard atmosphere's lapse rate changes. */
export const standardBreakHeights: readonly number[] = LAYERS.slice(1).map(([height]) => height)

/**
 * The standard atmosphere's temperature shape above a level, shifted to meet it, in hydrostatic
 * balance. `height` in geopotential m, `temperature` in K, `pressure` in Pa.
 */
export function standardShapeAbove(
  height: number,
  temperature: number,
  pressure: number,
): HydrostaticLayers {
  const above = LAYERS.filter(([base]) => base > height)
  const current = LAYERS.findLast(([base]) => base <= height) ?? LAYERS[0]
  return new HydrostaticLayers(
    [height, ...above.map(([base]) => base)],
    [current[1], ...above.map(([, lapse]) => lapse)],
    temperature,
    pressure,
    DRY_AIR_GAS_CONSTANT,
  )
}

/** The standard atmosphere as air to fly in: dry and still. */
export const standardAir: ColumnAir = {
  breakAltitudes: Float64Array.from(standardBreakHeights, geometricAltitude),
  observed: { temperature: null, wind: null },

  sample(_latitude, _longitude, altitude, _time, out) {
    this.sampleAltitude(altitude, out)
  },

  sampleAltitude(altitude: number, out: AirState) {
    const height = geopotentialHeight(altitude)
    out.temperature = standardLayers.temperature(height)
    out.pressure = standardLayers.pressure(height)
    out.density = airDensity(out.temperature, out.pressure, 0)
    out.viscosity = viscosity(out.temperature)
    out.windEast = 0
    out.windNorth = 0
  },
}
