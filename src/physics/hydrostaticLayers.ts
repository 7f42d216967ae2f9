import { STANDARD_GRAVITY } from './constants.ts'

/**
 * Air in hydrostatic balance whose temperature is piecewise linear in geopotential height: the
 * standard atmosphere, and every continuation of a sounding beyond its levels.
 */
export class HydrostaticLayers {
  private readonly heights: readonly number[]
  private readonly lapses: readonly number[]
  private readonly temperatures: number[]
  private readonly pressures: number[]
  private readonly gasConstant: number

  /**
   * `heights`: the layers' geopotential base heights, m, ascending; the first layer also reaches
   * below its base. `lapses`: dT/dH in each, K/m. The state at the first base follows, K and Pa,
   * and the specific gas constant of the air, J/(kg·K).
   */
  constructor(
    heights: readonly number[],
    lapses: readonly number[],
    temperature: number,
    pressure: number,
    gasConstant: number,
  ) {
    this.heights = heights
    this.lapses = lapses
    this.gasConstant = gasConstant
    this.temperatures = [temperature]
    this.pressures = [pressure]
    for (let layer = 1; layer < heights.length; layer++) {
      const base = heights[layer]
      const warmth = this.temperatureIn(layer - 1, base)
      this.pressures.push(this.pressureIn(layer - 1, base, warmth))
      this.temperatures.push(warmth)
    }
  }

  /** Temperature in K at a geopotential height in m. */
  temperature(height: number): number {
    return this.temperatureIn(this.layerAt(height), height)
  }

  /** Pressure in Pa at a geopotential height in m. */
  pressure(height: number): number {
    const layer = this.layerAt(height)
    return this.pressureIn(layer, height, this.temperatureIn(layer, height))
  }

  /** Geopotential height in m at which the pressure is `pressure` Pa: the inverse of `pressure`. */
  height(pressure: number): number {
    let layer = this.heights.length - 1
    while (layer > 0 && this.pressures[layer] < pressure) layer--
    const lapse = this.lapses[layer]
    const warmth = this.temperatures[layer]
    const logRatio = Math.log(this.pressures[layer] / pressure)
    const scale = this.gasConstant / STANDARD_GRAVITY
    const rise =
      lapse === 0
        ? logRatio * scale * warmth
        : (warmth / lapse) * (Math.exp(logRatio * scale * lapse) - 1)
    return this.heights[layer] + rise
  }

  private layerAt(height: number): number {
    let layer = this.heights.length - 1
    while (layer > 0 && height < this.heights[layer]) layer--
    return layer
  }

  private temperatureIn(layer: number, height: number): number {
    return this.temperatures[layer] + this.lapses[layer] * (height - this.heights[layer]) // US Std Atm 1976, eq. 23
  }

  private pressureIn(layer: number, height: number, warmth: number): number {
    const lapse = this.lapses[layer]
    const base = this.temperatures[layer]
    const pressure = this.pressures[layer]
    if (lapse === 0) {
      const fall = (-STANDARD_GRAVITY * (height - this.heights[layer])) / (this.gasConstant * base)
      return pressure * Math.exp(fall) // US Std Atm 1976, eq. 33b
    }
    return pressure * Math.pow(base / warmth, STANDARD_GRAVITY / (this.gasConstant * lapse)) // eq. 33a
  }
}
