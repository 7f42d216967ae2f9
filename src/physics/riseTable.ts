import { emptyAirState } from './air.ts'
import { type Column } from './column.ts'
import { MOLAR_GAS_CONSTANT } from './constants.ts'
import { gravity } from './earth.ts'
import { sphereDiameter } from './gas.ts'

/**
 * What the ascent through each whole slab of a column takes from the air alone, for gas of one
 * temperature offset: the steady rise needs then no more than the fill's moles and the masses.
 */
export class RiseTable {
  /** Gas warmer than the air by, K */
  readonly temperatureOffset: number
  /** Air displaced by a mole of gas in each slab, kg/mol */
  readonly displacedPerMole: Float64Array
  /** Best number of each kilogram of free lift in each slab, for a whole sphere, 1/kg */
  readonly bestPerLift: Float64Array
  /** Seconds that a slab takes at a Reynolds number of 1 with one mole of gas */
  readonly slowness: Float64Array
  /** Gas volume at each edge, m³/mol */
  readonly edgeVolumePerMole: Float64Array

  constructor(column: Column, temperatureOffset: number) {
    const { count, thickness } = column
    this.temperatureOffset = temperatureOffset
    this.displacedPerMole = new Float64Array(count)
    this.bestPerLift = new Float64Array(count)
    this.slowness = new Float64Array(count)
    this.edgeVolumePerMole = new Float64Array(count + 1)

    const air = emptyAirState()
    for (let slab = 0; slab < count; slab++) {
      const bottom = column.altitude(slab)
      const top = column.altitude(slab + 1)
      column.mean(bottom, top, air)
      const volumePerMole =
        (MOLAR_GAS_CONSTANT * (air.temperature + temperatureOffset)) / air.pressure // ideal gas law
      this.displacedPerMole[slab] = air.density * volumePerMole
      this.bestPerLift[slab] =
        (8 * gravity((bottom + top) / 2) * air.density) / (Math.PI * air.viscosity * air.viscosity) // Best = 8·F·ρ/(π·μ²)
      this.slowness[slab] =
        (thickness * air.density * sphereDiameter(volumePerMole)) / air.viscosity // Re = ρwD/μ
    }
    for (let edge = 0; edge <= count; edge++) {
      this.edgeVolumePerMole[edge] =
        (MOLAR_GAS_CONSTANT * (column.edgeTemperature[edge] + temperatureOffset)) /
        column.edgePressure[edge]
    }
  }
}
