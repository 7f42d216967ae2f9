import { standardLayers } from '../physics/standardAtmosphere.ts'

/**
 * The groups of five figures in a TEMP report, one function a group.
 * Source of forms and code tables: WMO-No. 306, volume I.1, FM 35 to FM 38 (from memory).
 */

const DEGREE = Math.PI / 180
const KNOT = 1852 / 3600 // m/s

/** Temperature in K, and dew point in K where it is given, of a group TTTaDD. */
export function temperatureGroup(group: string): { temperature?: number; dewPoint?: number } {
  const match = /^(\d\d)(\d)(\d\d|\/\/)$/.exec(group)
  if (!match) return {}
  const tenths = Number(match[1]) * 10 + Number(match[2])
  const celsius = (Number(match[2]) % 2 === 0 ? tenths : -tenths) / 10 // code table 3931: odd is below zero
  const temperature = celsius + 273.15
  const depression = match[3] === '//' ? null : depressionOf(Number(match[3]))
  return depression === null ? { temperature } : { temperature, dewPoint: temperature - depression }
}

/** Depression of the dew point in K: code table 0777. */
function depressionOf(code: number): number | null {
  if (code <= 50) return code / 10
  return code >= 56 ? code - 50 : null
}

/** Wind of a group ddfff: direction in radians where it blows from, speed in m/s. */
export function windGroup(
  group: string,
  knots: boolean,
): { windFrom?: number; windSpeed?: number } {
  const match = /^(\d\d)(\d{3})$/.exec(group)
  if (!match || Number(match[1]) > 36) return {}
  // Directions are to 5°; the 5 is added to the hundreds of the speed.
  const figures = Number(match[2])
  const degrees = Number(match[1]) * 10 + (figures >= 500 ? 5 : 0)
  return { windFrom: degrees * DEGREE, windSpeed: (figures % 500) * (knots ? KNOT : 1) }
}

/** Pressure in Pa of the figures PPP: whole hPa without the thousands, or, above 100 hPa, tenths. */
export function pressureFigures(figures: string, tenths: boolean): number | null {
  if (!/^\d{3}$/.test(figures)) return null
  const value = Number(figures)
  if (tenths) return value === 0 ? null : value * 10
  return (value < 100 ? value + 1000 : value) * 100
}

/**
 * Geopotential height in m of the figures hhh at a standard pressure in Pa: metres below the 500 hPa
 * surface, tens of metres from there up, the leading figures left out.
 */
export function heightFigures(figures: string, pressure: number): number | null {
  if (!/^\d{3}$/.test(figures)) return null
  const value = Number(figures)
  if (pressure === 100_000) return value >= 500 ? 500 - value : value // below sea level: 500 is added
  const unit = pressure > 50_000 ? 1 : 10
  const usual = standardLayers.height(pressure)
  return value * unit + 1000 * unit * Math.round((usual / unit - value) / 1000)
}

/** Latitude and longitude in radians of the groups 99LLL QLLLL. */
export function positionGroups(
  first: string,
  second: string,
): { latitude: number; longitude: number } | null {
  if (!/^99\d{3}$/.test(first) || !/^[1357]\d{4}$/.test(second)) return null
  const latitude = Number(first.slice(2)) / 10
  const longitude = Number(second.slice(1)) / 10
  const quadrant = second[0] // code table 3333: 1 NE, 3 SE, 5 SW, 7 NW
  if (latitude > 90 || longitude > 180) return null
  return {
    latitude: (quadrant === '3' || quadrant === '5' ? -latitude : latitude) * DEGREE,
    longitude: (quadrant === '5' || quadrant === '7' ? -longitude : longitude) * DEGREE,
  }
}

/** Elevation in m of a mobile station's group hhhhi; i tells metres (1 to 4) or feet (5 to 8). */
export function elevationGroup(group: string): number | null {
  if (!/^\d{4}[1-8]$/.test(group)) return null
  return Number(group.slice(0, 4)) * (group[4] >= '5' ? 0.3048 : 1)
}

/** Minutes since midnight of the group 8GGgg, the time of release. */
export function releaseGroup(group: string): number | null {
  if (!/^8\d{4}$/.test(group)) return null
  const hour = Number(group.slice(1, 3))
  const minute = Number(group.slice(3))
  return hour <= 23 && minute <= 59 ? hour * 60 + minute : null
}
