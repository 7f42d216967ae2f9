import { wrapLongitude } from '../physics/earth.ts'
import { BadSounding } from './badSounding.ts'
import { complete } from './complete.ts'
import { readCsv } from './csv.ts'
import { decodeText } from './decodeText.ts'
import { readIgra } from './igra.ts'
import { readJson } from './json.ts'
import { Notes } from './notes.ts'
import { type ReportedSounding, type Sounding } from './profile.ts'
import { recogniseText, type SoundingFormat } from './recognise.ts'

/** What the sender of a sounding may say beside its bytes. */
export interface ReadOptions {
  /** Recognised from the content where it is left out */
  format?: SoundingFormat
  /** In place of the name in the content */
  name?: string
  /**
   * Seconds since 1970. In place of the time in the content where that is one sounding; for those
   * that tell no time where it is several.
   */
  validAt?: number
}

/**
 * Reads every sounding in some bytes, checked and completed. Where there are several, those that
 * cannot be flown in are dropped with a note. Throws `BadSounding`, and nothing else, where none is
 * left. Takes time and memory in proportion to the bytes.
 */
export function readSoundings(bytes: Uint8Array, options: ReadOptions): Sounding[] {
  const notes = new Notes()
  const reports = readReports(bytes, options.format, notes)
  const soundings: Sounding[] = []
  let refused: BadSounding | null = null
  for (const report of reports) {
    const own = reports.length === 1 ? notes : new Notes()
    try {
      const labelled = label(report, options, reports.length === 1)
      soundings.push(complete(labelled, options.name ?? nameOf(labelled), own))
    } catch (error) {
      if (!(error instanceof BadSounding)) throw error
      refused ??= error
      notes.add(`sounding dropped: ${error.message}`, report.place)
    }
  }
  const first = soundings.at(0)
  if (!first) throw refused ?? new BadSounding('unparseable', [{ message: 'no sounding' }])
  if (reports.length > 1) first.notes.push(...notes.list())
  return soundings
}

function readReports(
  bytes: Uint8Array,
  format: SoundingFormat | undefined,
  notes: Notes,
): ReportedSounding[] {
  const text = decodeText(bytes)
  if (text.trim() === '') throw new BadSounding('unparseable', [{ message: 'empty' }])
  switch (format ?? recogniseText(text)) {
    case 'json':
      return [readJson(text)]
    case 'igra':
      return readIgra(text, notes)
    case 'csv':
      return [readCsv(text, notes)]
  }
}

/** The report with the sender's time, where it takes the place of its own, and a wrapped longitude. */
function label(report: ReportedSounding, options: ReadOptions, alone: boolean): ReportedSounding {
  const { validAt, longitude } = report
  const sent = options.validAt ?? null
  return {
    ...report,
    validAt: alone ? (sent ?? validAt) : (validAt ?? sent),
    longitude: longitude === null ? null : wrapLongitude(longitude),
  }
}

/** The content's own name, or the station and the time, which tells several of one station apart. */
function nameOf({ name, station, validAt }: ReportedSounding): string {
  if (name !== null) return name
  const time = validAt === null ? '' : ` ${new Date(validAt * 1000).toISOString().slice(0, 16)}Z`
  return (station ?? 'Sounding') + time
}
