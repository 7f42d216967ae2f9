import { Column } from '../physics/column.ts'
import { standardAir } from '../physics/standardAtmosphere.ts'

/** Where the air of a prediction comes from, as much as its cautions and its answer need to know. */
export interface AirSource {
  kind: 'standard' | 'profile'
  /** Identifies an uploaded sounding; null for the standard atmosphere */
  id: string | null
  name: string
  /** Seconds since 1970 UTC; null where the air has no time */
  validAt: number | null
  /** Where it was observed, radians; null where it has no place */
  position: { latitude: number; longitude: number } | null
  column: Column
}

/** The standard atmosphere, still. */
export const standardSource: AirSource = {
  kind: 'standard',
  id: null,
  name: 'US Standard Atmosphere 1976, still air',
  validAt: null,
  position: null,
  column: new Column(standardAir),
}
