import { type Air } from '../physics/air.ts'
import { type FieldAir } from '../fields/fieldAir.ts'
import { Column } from '../physics/column.ts'
import { standardAir } from '../physics/standardAtmosphere.ts'
import { type AirRecipe } from './airRecipe.ts'

/** Where the air of a prediction comes from, as much as its cautions and its answer need to know. */
export type AirSource = ColumnSource | FieldSource

/** Air that is one column over the whole flight. */
export interface ColumnSource {
  kind: 'standard' | 'profile'
  /** Identifies an uploaded sounding; null for the standard atmosphere */
  id: string | null
  name: string
  /** Seconds since 1970 UTC; null where the air has no time */
  validAt: number | null
  /** Where it was observed, radians; null where it has no place */
  position: { latitude: number; longitude: number } | null
  column: Column
  /** What the column is made of, for other threads to make it again */
  recipe: AirRecipe
}

/** A forecast, which varies along the flight. */
export interface FieldSource {
  kind: 'field'
  id: string
  name: string
  /** When the forecast's run began, s since 1970 UTC */
  referenceTime: number
  /** The air as it was asked for */
  field: FieldAir
  /** The same with the nearest air held beyond the grid and the times */
  holding: FieldAir
}

/** The air of a source at any place and time, beyond a forecast's grid and times the nearest. */
export function anyAirOf(source: AirSource): Air {
  return source.kind === 'field' ? source.holding : source.column.air
}

/** How old the air is at `time`, s: how far from when it was valid, or since the forecast's run; null where it has no time. */
export function airAge(source: AirSource, time: number): number | null {
  if (source.kind === 'field') return time - source.referenceTime
  return source.validAt === null ? null : time - source.validAt
}

/** The standard atmosphere, still. */
export const standardSource: ColumnSource = {
  kind: 'standard',
  id: null,
  name: 'US Standard Atmosphere 1976, still air',
  validAt: null,
  position: null,
  column: new Column(standardAir),
  recipe: { kind: 'standard' },
}
