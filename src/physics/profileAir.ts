import {
  airDensity,
  virtualTemperature,
  viscosity,
  type AirState,
  type AltitudeSpan,
  type ColumnAir,
} from './air.ts'
import { DRY_AIR_GAS_CONSTANT } from './constants.ts'
import { geometricAltitude, geopotentialHeight } from './earth.ts'
import { HydrostaticLayers } from './hydrostaticLayers.ts'
import { standardBreakHeights, standardLayers, standardShapeAbove } from './standardAtmosphere.ts'
import { type SoundingLevel } from './sounding.ts'

/** Lapse rate below the lowest level, K/m: the standard atmosphere's in the troposphere. */
const LAPSE_BELOW = -0.0065

/**
 * A sounding as air to fly in. Between levels temperature, wind and vapour pressure are linear in
 * geopotential height and so is ln p; no humidity above the highest humidity level. Beyond the
 * levels: the standard atmosphere's temperature shape above, 6.5 K/km below, pressure hydrostatic,
 * the nearest wind. A sounding without temperatures takes them from the standard atmosphere.
 */
export class ProfileAir implements ColumnAir {
  readonly breakAltitudes: Float64Array
  readonly observed: { temperature: AltitudeSpan | null; wind: AltitudeSpan | null }

  /** Every height at which some quantity has a level, ascending, and each quantity there. */
  private readonly heights: Float64Array
  private readonly temperatures: Float64Array
  private readonly logPressures: Float64Array
  private readonly vapourPressures: Float64Array
  private readonly windsEast: Float64Array
  private readonly windsNorth: Float64Array

  private readonly bottom: number
  private readonly top: number
  private readonly humidTop: number
  private readonly below: HydrostaticLayers
  private readonly above: HydrostaticLayers
  /** Vapour pressure over pressure at and below the lowest level. */
  private readonly humidityBelow: number
  /** The interval found last: neighbouring calls ask for neighbouring heights. */
  private interval = 0

  /** `levels`: a completed sounding with at least two wind levels and either no or two temperatures. */
  constructor(levels: readonly SoundingLevel[]) {
    const thermal = levels.filter(isThermal)
    const windy = levels.filter(isWindy)
    const bottom = thermal.at(0)
    const top = thermal.at(-1)
    const humid = thermal.filter(isHumid)

    if (bottom && top) {
      this.bottom = bottom.geopotentialHeight
      this.top = top.geopotentialHeight
      this.humidTop = humid.at(-1)?.geopotentialHeight ?? -Infinity
      const vapour = humid.at(0) === bottom ? (bottom.vapourPressure ?? 0) : 0
      this.humidityBelow = vapour / bottom.pressure
      const moistGasConstant =
        (DRY_AIR_GAS_CONSTANT * virtualTemperature(bottom.temperature, bottom.pressure, vapour)) /
        bottom.temperature
      this.below = new HydrostaticLayers(
        [this.bottom],
        [LAPSE_BELOW],
        bottom.temperature,
        bottom.pressure,
        moistGasConstant,
      )
      this.above = standardShapeAbove(this.top, top.temperature, top.pressure)
    } else {
      this.bottom = this.top = this.humidTop = -Infinity
      this.humidityBelow = 0
      this.below = this.above = standardLayers
    }

    const barometric = levels.filter(
      (level) => level.geopotentialHeight >= this.bottom && level.geopotentialHeight <= this.top,
    )
    this.heights = Float64Array.from(
      new Set([...barometric, ...windy].map((level) => level.geopotentialHeight)),
    ).sort()
    const spread = <L extends SoundingLevel>(from: readonly L[], value: (level: L) => number) =>
      this.heights.map((height) => interpolate(from, value, height))
    this.temperatures = spread(thermal, (level) => level.temperature)
    this.logPressures = spread(barometric.filter(isBarometric), (level) => Math.log(level.pressure))
    this.vapourPressures = spread(humid, (level) => level.vapourPressure)
    this.windsEast = spread(windy, (level) => level.windEast)
    this.windsNorth = spread(windy, (level) => level.windNorth)

    this.observed = {
      temperature: bottom && top ? altitudeSpan(this.bottom, this.top) : null,
      wind: altitudeSpan(
        windy.at(0)?.geopotentialHeight ?? 0,
        windy.at(-1)?.geopotentialHeight ?? 0,
      ),
    }
    this.breakAltitudes = Float64Array.from(
      new Set([...this.heights, ...standardBreakHeights.filter((height) => height > this.top)]),
      geometricAltitude,
    ).sort()
  }

  sample(
    _latitude: number,
    _longitude: number,
    altitude: number,
    _time: number,
    out: AirState,
  ): void {
    this.sampleAltitude(altitude, out)
  }

  sampleAltitude(altitude: number, out: AirState): void {
    const height = geopotentialHeight(altitude)
    const lower = this.findInterval(height)
    const upper = lower + 1
    const span = this.heights[upper] - this.heights[lower]
    const share = Math.min(1, Math.max(0, (height - this.heights[lower]) / span))
    out.windEast = mix(this.windsEast[lower], this.windsEast[upper], share)
    out.windNorth = mix(this.windsNorth[lower], this.windsNorth[upper], share)

    let vapour = 0
    if (height > this.top) {
      out.temperature = this.above.temperature(height)
      out.pressure = this.above.pressure(height)
    } else if (height < this.bottom) {
      out.temperature = this.below.temperature(height)
      out.pressure = this.below.pressure(height)
      vapour = this.humidityBelow * out.pressure
    } else {
      out.temperature = mix(this.temperatures[lower], this.temperatures[upper], share)
      out.pressure = Math.exp(mix(this.logPressures[lower], this.logPressures[upper], share))
      if (height <= this.humidTop) {
        vapour = mix(this.vapourPressures[lower], this.vapourPressures[upper], share)
      }
    }
    out.density = airDensity(out.temperature, out.pressure, vapour)
    out.viscosity = viscosity(out.temperature)
  }

  /** Index of the interval of `heights` that holds `height`, or the nearest one. */
  private findInterval(height: number): number {
    const { heights } = this
    const last = heights.length - 2
    let found = this.interval
    if (height >= heights[found] && height < heights[found + 1]) return found
    let low = 0
    let high = last
    while (low < high) {
      found = (low + high + 1) >> 1
      if (heights[found] <= height) low = found
      else high = found - 1
    }
    this.interval = low
    return low
  }
}

type Thermal = SoundingLevel & { temperature: number; pressure: number }
type Windy = SoundingLevel & { windEast: number; windNorth: number }

function isThermal(level: SoundingLevel): level is Thermal {
  return level.temperature !== undefined && level.pressure !== undefined
}

function isBarometric(level: SoundingLevel): level is SoundingLevel & { pressure: number } {
  return level.pressure !== undefined
}

function isHumid(level: Thermal): level is Thermal & { vapourPressure: number } {
  return level.vapourPressure !== undefined
}

function isWindy(level: SoundingLevel): level is Windy {
  return level.windEast !== undefined && level.windNorth !== undefined
}

function altitudeSpan(bottom: number, top: number): AltitudeSpan {
  return { bottom: geometricAltitude(bottom), top: geometricAltitude(top) }
}

function mix(lower: number, upper: number, share: number): number {
  return lower + (upper - lower) * share
}

/** Linear in height between the levels of `from`, held beyond them; 0 where there are none. */
function interpolate<L extends SoundingLevel>(
  from: readonly L[],
  value: (level: L) => number,
  height: number,
): number {
  if (from.length === 0) return 0
  let low = 0
  let high = from.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (from[middle].geopotentialHeight <= height) low = middle
    else high = middle
  }
  const lower = from[low]
  const upper = from[high]
  const span = upper.geopotentialHeight - lower.geopotentialHeight
  if (span === 0) return value(lower)
  const share = Math.min(1, Math.max(0, (height - lower.geopotentialHeight) / span))
  return mix(value(lower), value(upper), share)
}
