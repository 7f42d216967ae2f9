import { BadSounding } from './badSounding.ts'
import { type Notes } from './notes.ts'
import {
  MOST_LEVELS,
  MOST_SOUNDINGS,
  type ReportedLevel,
  type ReportedSounding,
} from './profile.ts'
import { elevationGroup, positionGroups } from './tempGroups.ts'
import { readPart, type Group, type PartForm } from './tempPart.ts'

const DAY = 86_400

/** Land, ship, dropsonde and mobile land station; parts A to D. */
const START = /^(TT|UU|XX|II)(AA|BB|CC|DD)$/

/** Where another report begins, be it of wind alone, which is not read. */
const END = /^(TT|UU|XX|II|PP|QQ|EE)(AA|BB|CC|DD)$/

/** Each sounding has four parts; many more are no reports. */
const MOST_PARTS = 5 * MOST_SOUNDINGS

interface Heading {
  /** What the parts of one sounding have in common */
  key: string
  station: string
  day: number
  hour: number
  form: PartForm
  position: { latitude: number; longitude: number } | null
  /** Of the ground, m */
  elevation: number | null
  /** Groups that the heading takes */
  length: number
}

interface Assembly {
  heading: Heading
  line: number
  release: number | null
  /** By pressure, so that levels told in two parts are one */
  levels: Map<number, ReportedLevel>
}

/** True where a text holds a TEMP report, a bulletin's heading and other reports before it allowed. */
export function isTemp(text: string): boolean {
  return /(^|\s)(TT|UU|XX|II)(AA|BB|CC|DD)\s+([A-Z0-9]{2,9}\s+)?\d{4}[\d/]\s/.test(text)
}

/**
 * Reads every sounding in TEMP reports (FM 35, 36, 37, 38), joining their parts A, B, C and D.
 * `near`: seconds since 1970, close to which the reports, which tell only day and hour, were made;
 * null where that is not known. Throws `BadSounding` where no report is found.
 */
export function readTemp(text: string, near: number | null, notes: Notes): ReportedSounding[] {
  const assemblies = new Map<string, Assembly>()
  let count = 0
  for (const [start, ...groups] of parts(text)) {
    if (++count > MOST_PARTS || assemblies.size >= MOST_SOUNDINGS) {
      notes.add('too many reports: from here on none is read', { line: start.line })
      break
    }
    const heading = readHeading(start.text, groups)
    if (!heading) {
      notes.add('report dropped: its heading cannot be read', { line: start.line })
      continue
    }
    const assembly = assemblies.get(heading.key) ?? begin(heading, start.line)
    assemblies.set(heading.key, assembly)
    const content = readPart(groups.slice(heading.length), heading.form)
    for (const { line } of content.skipped) notes.add('group that fits nowhere skipped', { line })
    assembly.release ??= content.release
    for (const level of content.levels) join(assembly, level)
  }
  if (assemblies.size === 0) {
    throw new BadSounding('unparseable', [
      { message: 'no TEMP report, such as TTAA 51231 94461 …, can be read' },
    ])
  }
  if (near === null) notes.add('TEMP reports tell only day and hour: the time is not known')
  return Array.from(assemblies.values(), (assembly) => finish(assembly, near))
}

/** The groups of each part, its first group first. A part ends with =, or where the next begins. */
function* parts(text: string): Generator<[Group, ...Group[]]> {
  let part: [Group, ...Group[]] | null = null
  let line = 0
  for (const content of text.split(/\r*\n|\r/)) {
    line++
    for (const [word] of content.matchAll(/[^\s=]+|=/g)) {
      if (word === '=' || END.test(word)) {
        if (part) yield part
        part = START.test(word) ? [{ text: word, line }] : null
      } else if (part && part.length <= MOST_LEVELS) part.push({ text: word, line })
    }
  }
  if (part) yield part
}

/** The groups before the levels: MMMM (D…D) YYGGI, then IIiii or 99LLL QLLLL MMMUU (hhhhi). */
function readHeading(start: string, groups: readonly Group[]): Heading | null {
  const kind = start.slice(0, 2)
  const part = start[2] as PartForm['part']
  const text = (index: number): string => groups.at(index)?.text ?? ''
  const named = kind === 'UU' || kind === 'II'
  const date = /^(\d\d)(\d\d)([\d/])$/.exec(text(named ? 1 : 0))
  if (!date) return null
  const knots = Number(date[1]) > 50
  const day = Number(date[1]) - (knots ? 50 : 0)
  const hour = Number(date[2])
  if (day < 1 || day > 31 || hour > 23) return null
  const form: PartForm = { part, knots, lastWind: date[3] }
  const common = { day, hour, form, elevation: null }

  if (kind === 'TT') {
    const station = text(1)
    if (!/^\d{5}$/.test(station)) return null
    return {
      ...common,
      key: `${kind} ${station} ${day} ${hour}`,
      station,
      position: null,
      length: 2,
    }
  }
  const first = named ? 2 : 1
  const position = positionGroups(text(first), text(first + 1))
  if (!position) return null
  const station = named ? text(0) : 'Dropsonde'
  const place = named ? '' : ` ${text(first)} ${text(first + 1)}`
  const length = first + (kind === 'II' ? 4 : 3)
  const elevation = kind === 'II' ? elevationGroup(text(length - 1)) : null
  return {
    ...common,
    key: `${kind} ${station} ${day} ${hour}${place}`,
    station,
    position,
    elevation,
    length,
  }
}

function begin(heading: Heading, line: number): Assembly {
  return { heading, line, release: null, levels: new Map() }
}

/** Adds a level, or what it tells beyond another report of the same pressure. */
function join({ heading, levels }: Assembly, level: ReportedLevel): void {
  const pressure = level.pressure ?? 0
  const known = levels.get(pressure)
  if (known) {
    levels.set(pressure, { ...level, ...known })
    return
  }
  // The surface comes first in part A; a mobile station tells how high it stands.
  if (levels.size === 0 && heading.elevation !== null && heading.form.part === 'A') {
    level.geopotentialHeight ??= heading.elevation
  }
  levels.set(pressure, level)
}

function finish(
  { heading, line, release, levels }: Assembly,
  near: number | null,
): ReportedSounding {
  const nominal = near === null ? null : nearest(heading.day, heading.hour, near)
  return {
    name: null,
    station: heading.station,
    validAt: nominal === null || release === null ? nominal : released(nominal, release),
    latitude: heading.position?.latitude ?? null,
    longitude: heading.position?.longitude ?? null,
    levels: [...levels.values()],
    place: { line },
  }
}

/** The time nearest to `near` that is this hour of this day of a month; null where no month has it. */
function nearest(day: number, hour: number, near: number): number | null {
  const date = new Date(near * 1000)
  const candidates = [-2, -1, 0, 1, 2]
    .map(
      (months) => new Date(Date.UTC(date.getUTCFullYear(), date.getUTCMonth() + months, day, hour)),
    )
    .filter((candidate) => candidate.getUTCDate() === day)
    .map((candidate) => candidate.getTime() / 1000)
    .sort((a, b) => Math.abs(a - near) - Math.abs(b - near))
  return candidates.at(0) ?? null
}

/** The release, in minutes since midnight, on the day that brings it closest to the nominal hour. */
function released(nominal: number, release: number): number {
  const time = Math.floor(nominal / DAY) * DAY + release * 60
  if (time - nominal > DAY / 2) return time - DAY
  return nominal - time > DAY / 2 ? time + DAY : time
}
