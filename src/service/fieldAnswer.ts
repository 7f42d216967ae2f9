import { stringify } from 'csv-stringify/sync'
import { type FieldLevel } from '../fields/fieldAir.ts'
import { type FieldFile } from '../fields/fieldFile.ts'
import { type FieldAnswer, type ColumnLevel } from './schemas/field.ts'
import { degrees, DEGREE, HECTOPASCAL, isoTime, round } from './units.ts'

/** A stored forecast in the names and units of the API. */
export function fieldAnswer(
  { header, grid, coverage }: FieldFile,
  id: string,
  name: string | undefined,
  createdAt: string,
): FieldAnswer {
  const { origin, referenceTime, heights } = header
  const run = isoTime(referenceTime).replace(/:\d\d\.000Z$/, 'Z')
  return {
    id,
    name: name ?? `Forecast of centre ${origin.centre}, run of ${run}`,
    createdAt,
    ...origin,
    referenceTime: isoTime(referenceTime),
    validTimes: header.validTimes.map(isoTime),
    grid: {
      description: grid.description,
      columns: grid.columns,
      rows: grid.rows,
      wraps: grid.wraps,
      corners: coverage.corners.map(({ latitude, longitude }) => ({
        latitudeDeg: degrees(latitude),
        longitudeDeg: degrees(longitude),
      })),
    },
    levelsHPa: header.levels.map((pressure) => round(pressure / HECTOPASCAL, 4)),
    humidityLevels: header.humidity?.levels.length ?? 0,
    heights: {
      lowestGeopotentialHeightM: round(heights.bottom, 1),
      highestGeopotentialHeightM: round(heights.top, 1),
    },
    skipped: header.skipped.map(({ reason, messages }) => ({ reason, messages })),
  }
}

/** A level of a forecast over a place. */
export function columnLevel(level: FieldLevel): ColumnLevel {
  const { windEast, windNorth, relativeHumidity } = level
  const from = (Math.atan2(-windEast, -windNorth) / DEGREE + 360) % 360
  return {
    pressureHPa: round(level.pressure / HECTOPASCAL, 4),
    geopotentialHeightM: round(level.geopotentialHeight, 2),
    temperatureK: round(level.temperature, 3),
    ...(relativeHumidity === undefined
      ? {}
      : { relativeHumidityPercent: round(relativeHumidity * 100, 2) }),
    windFromDeg: round(from, 2) % 360,
    windSpeedMs: round(Math.hypot(windEast, windNorth), 3),
    u: round(windEast, 3),
    v: round(windNorth, 3),
  }
}

const COLUMNS = [
  'pressureHPa',
  'geopotentialHeightM',
  'temperatureK',
  'relativeHumidityPercent',
  'windFromDeg',
  'windSpeedMs',
  'u',
  'v',
] as const satisfies (keyof ColumnLevel)[]

/** Levels as CSV, RFC 4180. */
export function columnCsv(levels: readonly ColumnLevel[]): string {
  return stringify([...levels], {
    header: true,
    columns: [...COLUMNS],
    record_delimiter: 'windows',
  })
}
