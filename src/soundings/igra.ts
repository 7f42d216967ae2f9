import { BadSounding } from './badSounding.ts'
import { type Notes } from './notes.ts'
import {
  MOST_LEVELS,
  MOST_SOUNDINGS,
  type ReportedLevel,
  type ReportedSounding,
} from './profile.ts'

const DEGREE = Math.PI / 180
const DAY = 86_400

/** Marks of values removed by quality control and of values never given. */
const REMOVED = -8888
const MISSING = -9999

/** Where the last field of a data record ends; a shorter line was cut, perhaps within a number. */
const LEVEL_LENGTH = 51

/**
 * Reads a file of the Integrated Global Radiosonde Archive, version 2: soundings of one header line
 * and its levels. Columns, units and marks: NOAA NCEI, igra2-data-format.txt. Soundings whose header
 * cannot be read are dropped with a note; throws `BadSounding` where there is none at all.
 */
export function readIgra(text: string, notes: Notes): ReportedSounding[] {
  const soundings: ReportedSounding[] = []
  let current: ReportedSounding | null = null
  let line = 0
  for (const record of lines(text)) {
    line++
    if (record.startsWith('#')) {
      current = readHeader(record, line)
      if (soundings.length >= MOST_SOUNDINGS) {
        const message = `more than ${MOST_SOUNDINGS} soundings; up to that many can be read at once`
        throw new BadSounding('unparseable', [{ line, message }])
      }
      if (current) soundings.push(current)
      else notes.add('sounding dropped: its header cannot be read', { line })
    } else if (record.trim() !== '' && current) {
      const level = readLevel(record, line)
      if (level && current.levels.length < MOST_LEVELS) current.levels.push(level)
      else notes.add('line dropped: no level can be read from it', { line })
    }
  }
  if (soundings.length === 0) {
    throw new BadSounding('unparseable', [
      {
        line: 1,
        message: 'no IGRA header, such as #USM00070026 2010 06 01 00 2303 …, can be read',
      },
    ])
  }
  return soundings
}

/** The lines of a text one after another, so that a large file is not held twice. */
function* lines(text: string): Generator<string> {
  let start = 0
  while (start < text.length) {
    const found = text.indexOf('\n', start)
    const end = found === -1 ? text.length : found
    yield text.slice(start, text[end - 1] === '\r' ? end - 1 : end)
    start = end + 1
  }
}

function readHeader(record: string, line: number): ReportedSounding | null {
  const station = record.slice(1, 12).trim()
  const year = integer(record, 14, 17)
  const month = integer(record, 19, 20)
  const day = integer(record, 22, 23)
  const hour = integer(record, 25, 26)
  const release = integer(record, 28, 31)
  const position = positionOf(integer(record, 56, 62), integer(record, 64, 71))
  if (!/^[A-Z0-9]{11}$/.test(station) || !year || !month || !day) return null
  const midnight = Date.UTC(year, month - 1, day) / 1000
  if (new Date(midnight * 1000).getUTCDate() !== day) return null
  return {
    name: null,
    station,
    validAt: releaseTime(midnight, hour ?? 99, release ?? 9999),
    ...position,
    levels: [],
    place: { line },
  }
}

/**
 * Release in seconds since 1970: `release` is HHMM, its minutes 99 where unknown, and belongs to the
 * day that brings it closest to the nominal `hour`; a sounding for 00 UTC is released the day before.
 */
function releaseTime(midnight: number, hour: number, release: number): number | null {
  const nominal = hour <= 23 ? midnight + hour * 3600 : null
  const releaseHour = Math.floor(release / 100)
  const minute = release % 100
  if (releaseHour > 23) return nominal
  const time = midnight + releaseHour * 3600 + (minute <= 59 ? minute * 60 : 0)
  if (nominal === null) return time
  if (time - nominal > DAY / 2) return time - DAY
  if (nominal - time > DAY / 2) return time + DAY
  return time
}

function positionOf(latitude: number | null, longitude: number | null) {
  // Mobile stations carry -98.8888 and -998.8888.
  const known =
    latitude !== null &&
    longitude !== null &&
    Math.abs(latitude) <= 90e4 &&
    Math.abs(longitude) <= 180e4
  return {
    latitude: known ? (latitude / 1e4) * DEGREE : null,
    longitude: known ? (longitude / 1e4) * DEGREE : null,
  }
}

function readLevel(record: string, line: number): ReportedLevel | null {
  if (!/^[1-3][0-2] [ \d-]/.test(record) || record.trimEnd().length !== LEVEL_LENGTH) return null
  const elapsed = integer(record, 4, 8)
  const pressure = integer(record, 10, 15)
  const height = integer(record, 17, 21)
  const tenths = integer(record, 23, 27)
  const humidity = integer(record, 29, 33)
  const depression = integer(record, 35, 39)
  const direction = integer(record, 41, 45)
  const speed = integer(record, 47, 51)

  const level: ReportedLevel = { place: { line } }
  if (elapsed !== null) level.elapsed = Math.floor(elapsed / 100) * 60 + (elapsed % 100)
  if (pressure !== null) level.pressure = pressure
  if (height !== null) level.geopotentialHeight = height
  if (tenths !== null) level.temperature = tenths / 10 + 273.15
  if (tenths !== null && depression !== null) {
    level.dewPoint = (tenths - depression) / 10 + 273.15
  }
  if (humidity !== null) level.relativeHumidity = humidity / 1000
  if (direction !== null) level.windFrom = direction * DEGREE
  if (speed !== null) level.windSpeed = speed / 10
  return level
}

/** The number in columns `first` to `last`, counted from 1; null where it is missing or none. */
function integer(record: string, first: number, last: number): number | null {
  const field = record.slice(first - 1, last).trim()
  if (!/^-?\d+$/.test(field)) return null
  const value = Number(field)
  return value === MISSING || value === REMOVED ? null : value
}
