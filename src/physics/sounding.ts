/**
 * One level of a completed sounding, SI. Levels ascend strictly in height. Temperature, humidity and
 * wind may each stand at levels of their own, but a level with a temperature has a pressure, and a
 * level with a vapour pressure has a temperature.
 */
export interface SoundingLevel {
  /** Geopotential m above mean sea level */
  geopotentialHeight: number
  /** Pa */
  pressure?: number
  /** K */
  temperature?: number
  /** Pa, over liquid water */
  vapourPressure?: number
  /** Towards east, m/s; given together with windNorth */
  windEast?: number
  /** Towards north, m/s */
  windNorth?: number
  /** Seconds since the sonde's release, where the report tells */
  elapsed?: number
  /** How far the sonde has drifted since release, radians, where the report tells */
  displacement?: Displacement
}

/** Differences of latitude and longitude, radians; the longitude's lies in [-π, π). */
export interface Displacement {
  latitude: number
  longitude: number
}
