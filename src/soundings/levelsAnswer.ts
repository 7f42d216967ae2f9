import { dewPoint, vapourPressure } from '../physics/air.ts'
import { geometricAltitude } from '../physics/earth.ts'
import { type SoundingLevel } from '../physics/sounding.ts'
import { type Sounding } from './profile.ts'

/** A completed level in the units of the API. */
export interface LevelAnswer {
  geopotentialHeightM: number
  altitudeM: number
  pressureHPa?: number
  temperatureK?: number
  dewPointK?: number
  relativeHumidityPercent?: number
  windFromDeg?: number
  windSpeedMs?: number
  elapsedS?: number
}

/** How many levels of a quantity there are, and between which geometric altitudes in m. */
export interface LevelsSummary {
  levels: number
  lowestAltitudeM: number | null
  highestAltitudeM: number | null
}

/** Vapour pressures below this, Pa, have no dew point that means anything. */
const LEAST_VAPOUR = 1e-6

/** Completed levels in the units of the API, rounded far below what any sonde resolves. */
export function levelsAnswer(levels: readonly SoundingLevel[]): LevelAnswer[] {
  return levels.map((level) => {
    const { pressure, temperature, vapourPressure: vapour, windEast, windNorth } = level
    const answer: LevelAnswer = {
      geopotentialHeightM: round(level.geopotentialHeight, 3),
      altitudeM: round(geometricAltitude(level.geopotentialHeight), 3),
    }
    if (pressure !== undefined) answer.pressureHPa = Number((pressure / 100).toPrecision(9))
    if (temperature !== undefined) answer.temperatureK = round(temperature, 4)
    if (vapour !== undefined && temperature !== undefined) {
      if (vapour > LEAST_VAPOUR) answer.dewPointK = round(dewPoint(vapour), 4)
      answer.relativeHumidityPercent = round((100 * vapour) / vapourPressure(temperature), 3)
    }
    if (windEast !== undefined && windNorth !== undefined) {
      const from = (Math.atan2(-windEast, -windNorth) * 180) / Math.PI
      answer.windSpeedMs = round(Math.hypot(windEast, windNorth), 4)
      answer.windFromDeg = answer.windSpeedMs === 0 ? 0 : round(from < 0 ? from + 360 : from, 3)
    }
    if (level.elapsed !== undefined) answer.elapsedS = level.elapsed
    return answer
  })
}

/** What a sounding holds, at a glance. */
export function summary({ levels }: Sounding): {
  temperature: LevelsSummary
  wind: LevelsSummary
} {
  return {
    temperature: span(levels.filter((level) => level.temperature !== undefined)),
    wind: span(levels.filter((level) => level.windEast !== undefined)),
  }
}

function span(levels: readonly SoundingLevel[]): LevelsSummary {
  const altitude = (level: SoundingLevel | undefined) =>
    level ? round(geometricAltitude(level.geopotentialHeight), 1) : null
  return {
    levels: levels.length,
    lowestAltitudeM: altitude(levels.at(0)),
    highestAltitudeM: altitude(levels.at(-1)),
  }
}

function round(value: number, decimals: number): number {
  return Number(value.toFixed(decimals))
}
