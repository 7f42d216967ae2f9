import { problemAt, type SoundingProblem } from './badSounding.ts'
import { type ReportedLevel } from './profile.ts'

const DEGREE = Math.PI / 180

interface Range {
  quantity:
    'pressure' | 'geopotentialHeight' | 'altitude' | 'temperature' | 'windFrom' | 'windSpeed'
  /** The member of a profile in JSON that gives it, for the path of a problem */
  member: string
  name: string
  unit: string
  /** How many SI units one `unit` is */
  scale: number
  /** In `unit` */
  least: number
  most: number
}

/** What the model can fly in: beyond these a value is a mistake of unit or of reading. */
const RANGES: readonly Range[] = [
  range('pressure', 'pressureHPa', 'pressure', 'hPa', 100, 0.01, 1100),
  range('geopotentialHeight', 'geopotentialHeightM', 'geopotential height', 'm', 1, -1000, 100_000),
  range('altitude', 'altitudeM', 'altitude', 'm', 1, -1000, 100_000),
  range('temperature', 'temperatureK', 'temperature', 'K', 1, 150, 350),
  range('windFrom', 'windFromDeg', 'wind direction', '°', DEGREE, 0, 360),
  range('windSpeed', 'windSpeedMs', 'wind speed', 'm/s', 1, 0, 150),
]

function range(
  quantity: Range['quantity'],
  member: string,
  name: string,
  unit: string,
  scale: number,
  least: number,
  most: number,
): Range {
  return { quantity, member, name, unit, scale, least, most }
}

/** What is wrong with the values of one level, each by itself. */
export function checkLevel(level: ReportedLevel): SoundingProblem[] {
  const problems: SoundingProblem[] = []
  for (const { quantity, member, name, unit, scale, least, most } of RANGES) {
    const value = level[quantity]
    if (value === undefined) continue
    const shown = Number((value / scale).toPrecision(9))
    if (shown >= least && shown <= most) continue
    const message = `${name} ${shown} ${unit}: from ${least} to ${most} ${unit} can be flown in`
    problems.push(problemAt(level.place, message, member))
  }
  return problems
}
