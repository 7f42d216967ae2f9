import { type SoundingLevel } from '../physics/sounding.ts'

/** A sounding ready to be flown in: checked, completed, SI. */
export interface Sounding {
  name: string
  /** Seconds since 1970 UTC: the release, or the nominal hour where the release is not told. */
  validAt: number | null
  /** Radians; null together with the longitude where the report tells no position */
  latitude: number | null
  /** Radians in [-π, π) */
  longitude: number | null
  /** Ascending strictly in geopotential height, as `SoundingLevel` promises */
  levels: SoundingLevel[]
  /** What was completed, limited, ignored or dropped on the way in */
  notes: Note[]
}

/** One thing done to a sounding on the way in, or many alike summed up. */
export interface Note {
  /** First line of a text it is about, from 1 */
  line?: number
  /** JSON pointer to the first member it is about */
  path?: string
  message: string
}

/** Where in the bytes something was read: a line of text from 1, a JSON pointer, or only in words. */
export type Place = { line: number } | { path: string } | { label: string }

/** One level as a report gives it, in SI but neither checked nor completed. */
export interface ReportedLevel {
  place: Place
  /** Pa */
  pressure?: number
  /** Geopotential m above mean sea level */
  geopotentialHeight?: number
  /** Geometric m above mean sea level; the geopotential height wins where both are given */
  altitude?: number
  /** K */
  temperature?: number
  /** K, over liquid water; wins over the relative humidity where both are given */
  dewPoint?: number
  /** Share of saturation over liquid water, 0 to 1 */
  relativeHumidity?: number
  /** Radians clockwise from north, where the wind blows from */
  windFrom?: number
  /** m/s */
  windSpeed?: number
  /** Seconds since release */
  elapsed?: number
}

/** A sounding as a report gives it. */
export interface ReportedSounding {
  /** What the content calls the sounding */
  name: string | null
  /** The station's identifier in the content, to make a name of */
  station: string | null
  validAt: number | null
  latitude: number | null
  longitude: number | null
  levels: ReportedLevel[]
  /** Where the levels as a whole stand */
  place: Place
}

/** More levels than any sonde reports: ten a second for almost three hours. */
export const MOST_LEVELS = 100_000

/** More soundings than are worth reading at once: one station's of several years. */
export const MOST_SOUNDINGS = 10_000
