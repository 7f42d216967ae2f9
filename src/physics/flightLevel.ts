import { standardLayers } from './standardAtmosphere.ts'

/** International foot, m. ICAO Annex 5. */
const FOOT = 0.3048

/**
 * Pressure in Pa at a flight level, hundreds of feet: the standard atmosphere's at that height, whatever
 * the weather (ICAO Annex 2, definition of a flight level).
 */
export function flightLevelPressure(flightLevel: number): number {
  return standardLayers.pressure(flightLevel * 100 * FOOT)
}
