import { type ReportedLevel } from './profile.ts'
import {
  heightFigures,
  pressureFigures,
  releaseGroup,
  temperatureGroup,
  windGroup,
} from './tempGroups.ts'

/** One group of a report and the line that it stands on. */
export interface Group {
  text: string
  line: number
}

/** What a part's heading tells about its groups. */
export interface PartForm {
  /** A and C hold standard levels, B and D significant ones; C and D stand above 100 hPa */
  part: 'A' | 'B' | 'C' | 'D'
  knots: boolean
  /** The last figure of the group YYGGI: up to which standard level winds are given */
  lastWind: string
}

/** What stands in one part. */
export interface PartContent {
  levels: ReportedLevel[]
  /** Minutes since midnight */
  release: number | null
  /** Groups that fit nowhere */
  skipped: Group[]
}

/** Standard surfaces in hPa by the figures PP that stand for them. */
const STANDARD = {
  A: new Map(
    Object.entries({
      '00': 1000,
      92: 925,
      85: 850,
      70: 700,
      50: 500,
      40: 400,
      30: 300,
      25: 250,
      20: 200,
      15: 150,
      10: 100,
    }),
  ),
  C: new Map(
    Object.entries({
      70: 70,
      50: 50,
      30: 30,
      20: 20,
      10: 10,
      '07': 7,
      '05': 5,
      '03': 3,
      '02': 2,
      '01': 1,
    }),
  ),
}

/** 31313 and the like begin the sections after the levels; 21212 those of wind. */
const SECTION = /^([3-6])(?!\1)(\d)\1\2\1$/

/** Reads one part of a report from the groups after its heading. */
export function readPart(groups: readonly Group[], form: PartForm): PartContent {
  const content: PartContent = { levels: [], release: null, skipped: [] }
  const cursor = new Cursor(groups)
  if (form.part === 'A' || form.part === 'C')
    readStandard(cursor, form, content, STANDARD[form.part])
  else readSignificant(cursor, form, content)
  readRelease(cursor, content)
  return content
}

/** Walks through groups. */
class Cursor {
  private readonly groups: readonly Group[]
  private next = 0

  constructor(groups: readonly Group[]) {
    this.groups = groups
  }

  peek(): Group | undefined {
    return this.groups.at(this.next)
  }

  take(): Group | undefined {
    return this.groups.at(this.next++)
  }

  /** The next group's text, empty at the end. */
  takeText(): string {
    return this.take()?.text ?? ''
  }
}

/** Sections 2 to 4 of parts A and C: surface, standard levels, tropopauses, greatest winds. */
function readStandard(
  cursor: Cursor,
  form: PartForm,
  content: PartContent,
  standard: ReadonlyMap<string, number>,
): void {
  const upper = form.part === 'C'
  for (let group = cursor.peek(); group && !SECTION.test(group.text); group = cursor.peek()) {
    cursor.take()
    const mark = group.text.slice(0, 2)
    const figures = group.text.slice(2)
    const level: ReportedLevel = { place: { line: group.line } }
    if (mark === '99' && !upper) {
      setPressure(level, pressureFigures(figures, false))
      Object.assign(
        level,
        temperatureGroup(cursor.takeText()),
        windGroup(cursor.takeText(), form.knots),
      )
    } else if (mark === '88') {
      if (figures === '999') continue
      setPressure(level, pressureFigures(figures, upper))
      Object.assign(
        level,
        temperatureGroup(cursor.takeText()),
        windGroup(cursor.takeText(), form.knots),
      )
    } else if (mark === '77' || mark === '66') {
      if (figures === '999') continue
      setPressure(level, pressureFigures(figures, upper))
      Object.assign(level, windGroup(cursor.takeText(), form.knots))
      const shear = cursor.peek()
      if (shear && /^4[\d/]{4}$/.test(shear.text) && !SECTION.test(shear.text)) cursor.take()
    } else {
      const pressure = standard.get(mark)
      if (pressure === undefined || !/^(\d{3}|\/{3})$/.test(figures)) {
        content.skipped.push(group)
        continue
      }
      setPressure(level, pressure * 100)
      const height = heightFigures(figures, pressure * 100)
      if (height !== null) level.geopotentialHeight = height
      Object.assign(level, temperatureGroup(cursor.takeText()))
      if (hasWind(pressure, form) && !isNext(cursor.peek(), standard)) {
        Object.assign(level, windGroup(cursor.takeText(), form.knots))
      }
    }
    keep(level, content)
  }
}

/** Winds are given up to the level of the figure Id, in hundreds of hPa, or tens in part C. */
function hasWind(pressure: number, { part, lastWind }: PartForm): boolean {
  if (lastWind === '/') return false
  const last = lastWind === '0' ? 10 : Number(lastWind)
  return pressure >= last * (part === 'A' ? 100 : 10)
}

/** True where the next group can only be the next level's, since its direction would be beyond 360°. */
function isNext(group: Group | undefined, standard: ReadonlyMap<string, number>): boolean {
  if (!group) return true
  const mark = group.text.slice(0, 2)
  return Number(mark) > 36 && (standard.has(mark) || /^(66|77|88|99)$/.test(mark))
}

/** Sections 5 and 6 of parts B and D: temperatures, then, after 21212, winds. */
function readSignificant(cursor: Cursor, form: PartForm, content: PartContent): void {
  const upper = form.part === 'D'
  let winds = false
  for (let group = cursor.peek(); group && !SECTION.test(group.text); group = cursor.peek()) {
    cursor.take()
    if (group.text === '21212') {
      winds = true
      continue
    }
    const match = /^(?:00|11|22|33|44|55|66|77|88|99)(\d{3}|\/{3})$/.exec(group.text)
    if (!match) {
      content.skipped.push(group)
      continue
    }
    const level: ReportedLevel = { place: { line: group.line } }
    setPressure(level, pressureFigures(match[1], upper))
    const value = cursor.takeText()
    Object.assign(level, winds ? windGroup(value, form.knots) : temperatureGroup(value))
    keep(level, content)
  }
}

/** Section 7: 31313, the sounding system, 8GGgg. */
function readRelease(cursor: Cursor, content: PartContent): void {
  if (cursor.peek()?.text !== '31313') return
  cursor.take()
  cursor.take() // correction, type of sonde and tracking
  const group = cursor.take()
  if (group) content.release = releaseGroup(group.text)
}

function setPressure(level: ReportedLevel, pressure: number | null): void {
  if (pressure !== null) level.pressure = pressure
}

/** Levels whose groups are all solidi mark a gap and hold nothing. */
function keep(level: ReportedLevel, content: PartContent): void {
  const told = level.geopotentialHeight ?? level.temperature ?? level.windSpeed
  if (level.pressure !== undefined && told !== undefined) content.levels.push(level)
}
