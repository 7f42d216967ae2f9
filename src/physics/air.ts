import { DRY_AIR_GAS_CONSTANT } from './constants.ts'

/** The air at one place and time, or the mean over a slab of it. */
export interface AirState {
  /** Pa */
  pressure: number
  /** K */
  temperature: number
  /** kg/m³ */
  density: number
  /** Dynamic viscosity, Pa·s */
  viscosity: number
  /** Towards east, m/s */
  windEast: number
  /** Towards north, m/s */
  windNorth: number
}

/** The one interface of every source of air. */
export interface Air {
  /**
   * Fills `out` with the air at latitude and longitude (radians), geometric altitude (m above mean
   * sea level) and time (s since 1970 UTC). Allocates nothing.
   */
  sample(latitude: number, longitude: number, altitude: number, time: number, out: AirState): void
}

/** Air that is the same over the whole flight but for altitude: the standard atmosphere, a sounding. */
export interface ColumnAir extends Air {
  /** Fills `out` with the air at a geometric altitude, m. Allocates nothing. */
  sampleAltitude(altitude: number, out: AirState): void
  /** Geometric altitudes, m, ascending, between which every quantity is smooth. */
  readonly breakAltitudes: Float64Array
  /** What the column was observed over; null for what it never observed. */
  readonly observed: { temperature: AltitudeSpan | null; wind: AltitudeSpan | null }
}

/** Air that differs from place to place and from time to time: a gridded forecast. */
export interface VaryingAir extends Air {
  /** Longest step in altitude, m, at which a flight sees enough of the air's detail along its path. */
  readonly longestStep: number
  /**
   * The next geometric altitude, m, above a given one where a quantity has a kink, over the place and
   * time sampled last; Infinity above all. Between kinks every quantity is smooth in altitude.
   */
  breakAbove(altitude: number): number
  /** The same below; -Infinity below all. */
  breakBelow(altitude: number): number
}

/** Geometric altitudes, m. */
export interface AltitudeSpan {
  bottom: number
  top: number
}

/** An all-zero state to be filled. */
export function emptyAirState(): AirState {
  return { pressure: 0, temperature: 0, density: 0, viscosity: 0, windEast: 0, windNorth: 0 }
}

/** Dynamic viscosity of air in Pa·s at a temperature in K. */
export function viscosity(temperature: number): number {
  return (1.458e-6 * temperature * Math.sqrt(temperature)) / (temperature + 110.4) // US Std Atm 1976, eq. 51
}

/** Vapour pressure in Pa of air whose dew point is `dewPoint` K, over liquid water. */
export function vapourPressure(dewPoint: number): number {
  const celsius = dewPoint - 273.15
  return 611.2 * Math.exp((17.62 * celsius) / (243.12 + celsius)) // WMO-No. 8, vol. I, annex 4.B
}

/** Dew point in K of air whose vapour pressure is `pressure` Pa: the inverse of `vapourPressure`. */
export function dewPoint(pressure: number): number {
  const ratio = Math.log(pressure / 611.2)
  return 273.15 + (243.12 * ratio) / (17.62 - ratio) // WMO-No. 8, vol. I, annex 4.B, solved for t
}

/** Virtual temperature in K of air at `temperature` K and `pressure` Pa holding vapour at `vapour` Pa. */
export function virtualTemperature(temperature: number, pressure: number, vapour: number): number {
  return temperature / (1 - (0.378 * vapour) / pressure) // 0.378 = 1 − Mw/Md, WMO-No. 8
}

/** Density in kg/m³ of humid air, from the ideal gas law with virtual temperature. */
export function airDensity(temperature: number, pressure: number, vapour: number): number {
  return pressure / (DRY_AIR_GAS_CONSTANT * virtualTemperature(temperature, pressure, vapour))
}
