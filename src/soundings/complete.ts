import { type SoundingLevel } from '../physics/sounding.ts'
import { BadSounding, MOST_PROBLEMS, problemAt, type SoundingProblem } from './badSounding.ts'
import { dropDistantHumidity, dropExcessVapour } from './boundHumidity.ts'
import { checkLevel } from './checkLevel.ts'
import { draftLevel, type DraftLevel } from './draftLevel.ts'
import { completeThermalHeights, interpolateHeights } from './heightsFromPressures.ts'
import { keepAscent } from './keepAscent.ts'
import { mergeEqualHeights, mergeEqualPressures } from './mergeLevels.ts'
import { type Notes } from './notes.ts'
import { completePressures } from './pressuresFromHeights.ts'
import { type ReportedLevel, type ReportedSounding, type Sounding } from './profile.ts'
import { settlePressures } from './settlePressures.ts'

/**
 * Checks the levels of a report and completes them to a sounding that keeps the promises of
 * `SoundingLevel` and has at least two levels with wind, and either none or two with temperature.
 * Adds to `notes` what it did. Throws `BadSounding` where the report cannot be flown in.
 */
export function complete(report: ReportedSounding, name: string, notes: Notes): Sounding {
  refuse(problemsOf(report.levels))
  let levels = keepAscent(report.levels, notes).map((level) => draftLevel(level, notes))
  levels = levels.filter((level) => saysSomething(level, notes))

  levels = mergeEqualHeights(levels, notes)
  refuse(settlePressures(levels, notes))
  levels = mergeEqualPressures(levels, notes)
  dropExcessVapour(levels, notes)
  completeThermalHeights(levels, notes)
  levels = mergeEqualHeights(levels, notes)
  completePressures(levels, notes)
  interpolateHeights(levels, notes)
  levels = fallingPressures(mergeEqualHeights(levels, notes), notes)
  dropExcessVapour(levels, notes)
  dropDistantHumidity(levels, notes)

  refuse(problemsOf(levels.map(asReported)))
  refuse(tooFew(levels, report))
  if (!levels.some((level) => level.temperature !== undefined)) {
    notes.add('no temperatures: flown in with those of the standard atmosphere')
  }
  const { validAt, latitude, longitude } = report
  return { name, validAt, latitude, longitude, levels: levels.map(finish), notes: notes.list() }
}

function refuse(problems: readonly SoundingProblem[]): void {
  if (problems.length === 0) return
  throw new BadSounding('not-flyable', problems.slice(0, MOST_PROBLEMS))
}

function problemsOf(levels: readonly ReportedLevel[]): SoundingProblem[] {
  const problems: SoundingProblem[] = []
  for (const level of levels) {
    problems.push(...checkLevel(level))
    if (problems.length >= MOST_PROBLEMS) break
  }
  return problems
}

function saysSomething(level: DraftLevel, notes: Notes): boolean {
  const { pressure, height, temperature, wind } = level
  if (pressure === undefined && height === undefined) {
    notes.add('level with neither pressure nor height dropped', level.place)
    return false
  }
  if (temperature !== undefined || wind !== undefined) return true
  if (pressure !== undefined && height !== undefined) return true
  notes.add('level with neither temperature nor wind dropped', level.place)
  return false
}

/** Leaves out pressures that completing brought out of order, which only rounding can do. */
function fallingPressures(levels: readonly DraftLevel[], notes: Notes): DraftLevel[] {
  let below = Infinity
  return levels.filter((level) => {
    if (level.height === undefined) return false
    if (level.pressure === undefined || level.pressure < below) {
      below = level.pressure ?? below
      return true
    }
    notes.add('level at the pressure of the one beneath dropped', level.place)
    return false
  })
}

/** The completed level again as a report, to check what completing made of it. */
function asReported({ place, pressure, height }: DraftLevel): ReportedLevel {
  return {
    place,
    ...(pressure === undefined ? {} : { pressure }),
    ...(height === undefined ? {} : { geopotentialHeight: height }),
  }
}

function tooFew(levels: readonly DraftLevel[], { place }: ReportedSounding): SoundingProblem[] {
  const problems: SoundingProblem[] = []
  const winds = levels.filter((level) => level.wind !== undefined).length
  const temperatures = levels.filter((level) => level.temperature !== undefined).length
  if (winds < 2) {
    const message = `${count(winds, 'wind')}: 2 or more can be flown in, each with wind direction and speed and with a pressure or a height`
    problems.push(problemAt(place, message))
  }
  if (temperatures === 1) {
    const message = `1 level with a temperature: 2 or more can be flown in, or none, in the temperatures of the standard atmosphere`
    problems.push(problemAt(place, message))
  }
  return problems
}

function count(levels: number, quantity: string): string {
  return `${levels === 0 ? 'no' : levels} ${levels === 1 ? 'level' : 'levels'} with ${quantity}`
}

function finish(level: DraftLevel): SoundingLevel {
  const { height, pressure, temperature, vapourPressure, wind, elapsed } = level
  return {
    geopotentialHeight: height ?? NaN,
    ...(pressure === undefined ? {} : { pressure }),
    ...(temperature === undefined ? {} : { temperature }),
    ...(vapourPressure === undefined ? {} : { vapourPressure }),
    ...(wind === undefined ? {} : { windEast: wind.east, windNorth: wind.north }),
    ...(elapsed === undefined ? {} : { elapsed }),
  }
}
