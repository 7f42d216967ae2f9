import { type ColumnLevel } from '../../service/schemas/field.ts'
import { dewPoint, vapourPressure } from '../../physics/air.ts'
import { geometricAltitude } from '../../physics/earth.ts'
import { type Level } from '../pictures/windColumn.ts'

/** Vapour pressures below this, Pa, have no dew point that means anything. */
const LEAST_VAPOUR = 1e-6

/** The levels of a forecast over a place as a sounding has them, so that the same pictures draw them. */
export function columnLevels(levels: readonly ColumnLevel[]): Level[] {
  return levels.map((level) => {
    const { geopotentialHeightM, temperatureK, relativeHumidityPercent } = level
    const vapour = ((relativeHumidityPercent ?? 0) / 100) * vapourPressure(temperatureK)
    return {
      geopotentialHeightM,
      altitudeM: geometricAltitude(geopotentialHeightM),
      pressureHPa: level.pressureHPa,
      temperatureK,
      windFromDeg: level.windFromDeg,
      windSpeedMs: level.windSpeedMs,
      ...(vapour > LEAST_VAPOUR ? { dewPointK: dewPoint(vapour) } : {}),
      ...(relativeHumidityPercent === undefined ? {} : { relativeHumidityPercent }),
    }
  })
}
