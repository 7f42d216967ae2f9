import { vapourPressure } from '../physics/air.ts'
import { geopotentialHeight } from '../physics/earth.ts'
import { type Notes } from './notes.ts'
import { type Place, type ReportedLevel } from './profile.ts'

/** A level on its way to being complete, SI. */
export interface DraftLevel {
  place: Place
  pressure?: number
  /** Geopotential m */
  height?: number
  temperature?: number
  vapourPressure?: number
  wind?: { east: number; north: number }
  elapsed?: number
}

/** Relative humidities up to here are limited to saturation, larger ones are not believed. */
const MOST_HUMIDITY = 1.1

/** Dew points in K outside these are not believed; the lowest lies below any in the atmosphere. */
const DEW_POINTS = { least: 120, most: 350 }

/** A reported level in the quantities of the model. */
export function draftLevel(level: ReportedLevel, notes: Notes): DraftLevel {
  const draft: DraftLevel = { place: level.place }
  if (level.pressure !== undefined) draft.pressure = level.pressure
  if (level.geopotentialHeight !== undefined) draft.height = level.geopotentialHeight
  else if (level.altitude !== undefined) draft.height = geopotentialHeight(level.altitude)
  if (level.elapsed !== undefined) draft.elapsed = level.elapsed
  if (level.temperature !== undefined) draft.temperature = level.temperature

  const vapour = vapourOf(level, notes)
  if (vapour !== undefined) draft.vapourPressure = vapour
  const wind = windOf(level, notes)
  if (wind !== undefined) draft.wind = wind
  return draft
}

function vapourOf(level: ReportedLevel, notes: Notes): number | undefined {
  const { place, temperature, dewPoint, relativeHumidity } = level
  if (dewPoint === undefined && relativeHumidity === undefined) return undefined
  if (temperature === undefined) {
    notes.add('humidity without a temperature dropped', place)
    return undefined
  }
  if (dewPoint !== undefined) {
    if (dewPoint >= DEW_POINTS.least && dewPoint <= DEW_POINTS.most) {
      if (dewPoint > temperature) notes.add('dew point above the temperature limited to it', place)
      return vapourPressure(Math.min(dewPoint, temperature))
    }
    notes.add('dew point out of all bounds dropped', place)
  }
  if (relativeHumidity === undefined) return undefined
  if (relativeHumidity < 0 || relativeHumidity > MOST_HUMIDITY) {
    notes.add('relative humidity outside 0 to 110 % dropped', place)
    return undefined
  }
  if (relativeHumidity > 1) notes.add('relative humidity above 100 % limited to it', place)
  return Math.min(relativeHumidity, 1) * vapourPressure(temperature)
}

function windOf(level: ReportedLevel, notes: Notes): { east: number; north: number } | undefined {
  const { place, windFrom, windSpeed } = level
  if (windSpeed === 0) return { east: 0, north: 0 } // calm air comes from nowhere
  if (windFrom !== undefined && windSpeed !== undefined) {
    return { east: -windSpeed * Math.sin(windFrom), north: -windSpeed * Math.cos(windFrom) }
  }
  if (windSpeed !== undefined) notes.add('wind speed without a direction dropped', place)
  if (windFrom !== undefined) notes.add('wind direction without a speed dropped', place)
  return undefined
}

export type Barometric = DraftLevel & { pressure: number }
export type Thermal = Barometric & { temperature: number }
/** A level whose pressure and height are both known. */
export type Known = Barometric & { height: number }

export function isBarometric(level: DraftLevel): level is Barometric {
  return level.pressure !== undefined
}

export function isThermal(level: DraftLevel): level is Thermal {
  return level.pressure !== undefined && level.temperature !== undefined
}

export function isKnown(level: DraftLevel): level is Known {
  return level.pressure !== undefined && level.height !== undefined
}

/** Sorts from the ground up. */
export function byFallingPressure(a: Barometric, b: Barometric): number {
  return b.pressure - a.pressure
}

/**
 * Takes from `other`, another report of the same level, what `level` lacks. Returns false where both
 * tell the same quantity, so that something of `other` was left out.
 */
export function absorb(level: DraftLevel, other: DraftLevel): boolean {
  let whole = true
  if (level.temperature === undefined) {
    if (other.temperature !== undefined) {
      level.temperature = other.temperature
      if (other.vapourPressure !== undefined) level.vapourPressure = other.vapourPressure
    }
  } else if (other.temperature !== undefined) whole = false
  if (level.wind === undefined) {
    if (other.wind !== undefined) level.wind = other.wind
  } else if (other.wind !== undefined) whole = false
  if (level.pressure === undefined && other.pressure !== undefined) level.pressure = other.pressure
  if (level.height === undefined && other.height !== undefined) level.height = other.height
  if (level.elapsed === undefined && other.elapsed !== undefined) level.elapsed = other.elapsed
  return whole
}
