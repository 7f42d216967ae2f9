import {
  airDensity,
  virtualTemperature,
  viscosity,
  vapourPressure,
  type AirState,
  type AltitudeSpan,
  type VaryingAir,
} from '../physics/air.ts'
import { DRY_AIR_GAS_CONSTANT, STANDARD_GRAVITY } from '../physics/constants.ts'
import { geometricAltitude, geopotentialHeight, wrapLongitude } from '../physics/earth.ts'
import { type FieldFile } from './fieldFile.ts'
import { FieldTiles } from './fieldTiles.ts'
import { type OutsidePolicy } from './outsideField.ts'
import { type Grid } from './grid.ts'
import { LAPSE_BELOW } from './missingLevels.ts'
import { continueAbove } from './standardContinuation.ts'
import { HEIGHT, LEVEL_VALUES, TEMPERATURE, VAPOUR, WIND_EAST, WIND_NORTH } from './tiles.ts'

/**
 * Longest steps, m of altitude, in which a flight takes a field: a balloon drifts over several cells of a
 * fine grid in a step of a coarse one. Halving either moves a landing by metres (tests/fields/flight.test.ts).
 */
const COARSE_STEP = 1500
const FINE_STEP = 750

/** Grids whose points lie closer together than this, m, are fine. */
const FINE_GRID = 15_000

/** What a flight took from a field beyond what the field holds. */
export interface FieldUse {
  /** The nearest place on the grid's edge was taken */
  heldPlace: boolean
  /** The first or last time was taken */
  heldTime: boolean
  /** Geometric altitudes, m, sampled above the highest and below the lowest level */
  aboveLevels: AltitudeSpan | null
  belowLevels: AltitudeSpan | null
}

/** One level of the air over a place. SI. */
export interface FieldLevel {
  pressure: number
  geopotentialHeight: number
  temperature: number
  /** Over liquid water; undefined above the highest level with humidity */
  vapourPressure?: number
  /** 0 to 1, over liquid water */
  relativeHumidity?: number
  windEast: number
  windNorth: number
}

/**
 * A gridded forecast as air to fly in. Linear in time and, in the grid's own index space, horizontally;
 * between levels temperature, wind and vapour pressure are linear in geopotential height and so is ln p;
 * beyond them as beyond a sounding's (ProfileAir).
 */
export class FieldAir implements VaryingAir {
  readonly longestStep: number
  readonly file: FieldFile
  private readonly tiles: FieldTiles
  private readonly logPressures: Float64Array
  /** Index of the highest level with humidity, −1 without any. */
  private readonly humidTop: number
  private readonly lastInterval: number
  private readonly bottomPressure: number
  private readonly topPressure: number
  /** The interval found last: neighbouring calls ask for neighbouring heights. */
  private interval = 0
  /** What is read from the tiles, to be filled again. */
  private readonly values = new Float64Array(LEVEL_VALUES)
  private lowestAbove = Infinity
  private highestAbove = -Infinity
  private lowestBelow = Infinity
  private highestBelow = -Infinity

  constructor(file: FieldFile, outside: OutsidePolicy) {
    this.file = file
    this.tiles = new FieldTiles(file, outside)
    const { levels, humidity } = file.header
    this.logPressures = Float64Array.from(levels, Math.log)
    this.longestStep = spacing(file.grid) < FINE_GRID ? FINE_STEP : COARSE_STEP
    this.humidTop = humidity ? levels.indexOf(humidity.levels[humidity.levels.length - 1]) : -1
    this.lastInterval = levels.length - 2
    this.bottomPressure = levels[0]
    this.topPressure = levels[levels.length - 1]
  }

  /** @throws OutsideField beyond the grid or the times, where such air is refused or no value is near. */
  sample(latitude: number, longitude: number, altitude: number, time: number, out: AirState): void {
    const { tiles } = this
    tiles.locate(latitude, longitude, time)
    const height = geopotentialHeight(altitude)
    let lower = this.interval
    let bottom = tiles.height(lower)
    let top = tiles.height(lower + 1)
    while (height < bottom && lower > 0) {
      lower--
      top = bottom
      bottom = tiles.height(lower)
    }
    while (height >= top && lower < this.lastInterval) {
      lower++
      bottom = top
      top = tiles.height(lower + 1)
    }
    this.interval = lower

    const { values } = this
    const share = (height - bottom) / (top - bottom)
    if (share > 1) this.sampleAbove(height, altitude, out)
    else if (share < 0) this.sampleBelow(height, altitude, out)
    else {
      const { logPressures } = this
      tiles.between(lower, share, values)
      out.temperature = values[TEMPERATURE]
      out.windEast = values[WIND_EAST]
      out.windNorth = values[WIND_NORTH]
      const low = logPressures[lower]
      out.pressure = Math.exp(low + (logPressures[lower + 1] - low) * share)
      const vapour = lower < this.humidTop ? values[VAPOUR] : 0
      out.density = airDensity(out.temperature, out.pressure, vapour)
    }
    out.viscosity = viscosity(out.temperature)
    if (!(out.density > 0)) tiles.refuse('values', latitude, longitude, time)
  }

  /** The next level's altitude above an altitude, over the place sampled last. */
  breakAbove(altitude: number): number {
    const height = geopotentialHeight(altitude)
    const { tiles, lastInterval } = this
    let level = this.interval
    while (level > 0 && tiles.height(level - 1) > height) level--
    while (level <= lastInterval + 1 && tiles.height(level) <= height) level++
    return level > lastInterval + 1 ? Infinity : geometricAltitude(tiles.height(level))
  }

  /** The next level's altitude below an altitude, over the place sampled last. */
  breakBelow(altitude: number): number {
    const height = geopotentialHeight(altitude)
    const { tiles, lastInterval } = this
    let level = this.interval + 1
    while (level <= lastInterval && tiles.height(level + 1) < height) level++
    while (level >= 0 && tiles.height(level) >= height) level--
    return level < 0 ? -Infinity : geometricAltitude(tiles.height(level))
  }

  /** The levels over a place, from the ground up. Radians, s since 1970 UTC. Throws as `sample`. */
  column(latitude: number, longitude: number, time: number): FieldLevel[] {
    const { tiles } = this
    tiles.locate(latitude, longitude, time)
    const { values } = this
    return this.file.header.levels.map((pressure, index) => {
      tiles.level(index, values)
      const temperature = values[TEMPERATURE]
      if (Number.isNaN(temperature)) tiles.refuse('values', latitude, longitude, time)
      const humidity = {
        vapourPressure: values[VAPOUR],
        relativeHumidity: values[VAPOUR] / vapourPressure(temperature),
      }
      return {
        pressure,
        geopotentialHeight: values[HEIGHT],
        temperature,
        ...(index <= this.humidTop && humidity),
        windEast: values[WIND_EAST],
        windNorth: values[WIND_NORTH],
      }
    })
  }

  /** What was taken from beyond the field since the last call. */
  takeUse(): FieldUse {
    const span = (bottom: number, top: number) => (top >= bottom ? { bottom, top } : null)
    const use = {
      ...this.tiles.takeHeld(),
      aboveLevels: span(this.lowestAbove, this.highestAbove),
      belowLevels: span(this.lowestBelow, this.highestBelow),
    }
    this.lowestAbove = this.lowestBelow = Infinity
    this.highestAbove = this.highestBelow = -Infinity
    return use
  }

  private sampleAbove(height: number, altitude: number, out: AirState): void {
    const { values: top } = this
    this.tiles.level(this.lastInterval + 1, top)
    continueAbove(top[HEIGHT], top[TEMPERATURE], this.topPressure, height, out)
    out.density = airDensity(out.temperature, out.pressure, 0)
    out.windEast = top[WIND_EAST]
    out.windNorth = top[WIND_NORTH]
    this.lowestAbove = Math.min(this.lowestAbove, geometricAltitude(top[HEIGHT]))
    this.highestAbove = Math.max(this.highestAbove, altitude)
  }

  private sampleBelow(height: number, altitude: number, out: AirState): void {
    const { values: bottom } = this
    this.tiles.level(0, bottom)
    const pressure = this.bottomPressure
    const temperature = bottom[TEMPERATURE]
    const vapour = bottom[VAPOUR]
    const moistGasConstant =
      (DRY_AIR_GAS_CONSTANT * virtualTemperature(temperature, pressure, vapour)) / temperature
    out.temperature = temperature + LAPSE_BELOW * (height - bottom[HEIGHT])
    out.pressure =
      pressure *
      (temperature / out.temperature) ** (STANDARD_GRAVITY / (moistGasConstant * LAPSE_BELOW)) // US Std Atm 1976, eq. 33a
    out.density = airDensity(out.temperature, out.pressure, (vapour / pressure) * out.pressure)
    out.windEast = bottom[WIND_EAST]
    out.windNorth = bottom[WIND_NORTH]
    this.lowestBelow = Math.min(this.lowestBelow, altitude)
    this.highestBelow = Math.max(this.highestBelow, geometricAltitude(bottom[HEIGHT]))
  }
}

/** Distance, m, between two neighbouring rows in the middle of a grid, on a sphere. */
function spacing(grid: Grid): number {
  const column = Math.floor(grid.columns / 2)
  const row = Math.floor(grid.rows / 2)
  const [here, next] = [grid.position(column, row - 1), grid.position(column, row)]
  const eastward = wrapLongitude(next.longitude - here.longitude) * Math.cos(here.latitude)
  return 6_371_009 * Math.hypot(next.latitude - here.latitude, eastward) // mean radius, GRS 80
}
