import { FetchError } from './fetchError.ts'
import { type SourceSettings } from './sourceSettings.ts'

/** A stretch of a file, bytes; `end` is the first byte after it, null the end of the file. */
export interface ByteRange {
  start: number
  end: number | null
}

/** What to fetch of a file. */
export interface WantedRanges {
  /** In the order of the file; neighbours are joined */
  ranges: ByteRange[]
  /** GRIB messages in them: several index lines may share one */
  messages: number
}

type Wanted = NonNullable<SourceSettings['index']>['wanted']

interface Line {
  offset: number
  variable: string
  level: string
}

/**
 * Finds the wanted messages in an index, one line a field as the inventories of wgrib2 are written:
 * `number:byte offset:d=YYYYMMDDHH:variable:level:forecast:`. `runTime` in s since 1970 UTC.
 * @throws FetchError where it cannot be read, is of another run, or lacks a wanted field
 */
export function wantedRanges(index: string, wanted: Wanted, runTime: number): WantedRanges {
  const lines = index
    .split(/\r?\n/)
    .filter((line) => line !== '')
    .map((line) => readLine(line, runTime))
  const starts = [...new Set(lines.map(({ offset }) => offset))].sort((a, b) => a - b)
  const chosen = new Set<number>()
  for (const { variables, levels } of wanted) {
    for (const variable of variables) {
      for (const level of levels) {
        const found = lines.filter((line) => line.variable === variable && line.level === level)
        if (found.length === 0) {
          throw new FetchError(`the index lacks ${variable} at ${level}`, 'anew')
        }
        for (const { offset } of found) chosen.add(offset)
      }
    }
  }
  const ranges: ByteRange[] = []
  starts.forEach((start, place) => {
    if (!chosen.has(start)) return
    const end = starts.at(place + 1) ?? null
    const last = ranges.at(-1)
    if (last?.end === start) last.end = end
    else ranges.push({ start, end })
  })
  return { ranges, messages: chosen.size }
}

function readLine(line: string, runTime: number): Line {
  const [, digits, date, variable, level] =
    /^[\d.]+:(\d{1,15}):d=(\d{10})(?:\d{2,4})?:([^:]+):([^:]+):/.exec(line) ?? []
  if (!digits)
    throw new FetchError(`the index has a line of another form: ${line.slice(0, 80)}`, 'anew')
  const run = new Date(runTime * 1000).toISOString().slice(0, 13).replaceAll(/\D/g, '')
  if (date !== run) throw new FetchError(`the index is of the run ${date}, not ${run}`, 'anew')
  return { offset: Number(digits), variable, level }
}
