import { type Displacement } from '../physics/sounding.ts'
import { type SoundingProblem } from './badSounding.ts'
import { type Quantity } from './csvHeadings.ts'
import { parseTime } from './parseTime.ts'
import { type ReportedLevel } from './profile.ts'

const MISSING = -9999

/** A column that is used. */
export interface Column {
  index: number
  heading: string
  quantity: Quantity
  toSi: (value: number) => number
}

/** One line of the table. */
export interface Row {
  line: number
  cells: string[]
}

/** Turns rows into levels, and gathers what stands for the whole sounding on the way. */
export class CsvTable {
  readonly problems: SoundingProblem[] = []
  timeWithoutZone = false
  private readonly columns: readonly Column[]
  private readonly decimal: string
  private readonly times: (number | null)[] = []
  private readonly positions: Partial<Displacement>[] = []

  constructor(columns: readonly Column[], decimal: string) {
    this.columns = columns
    this.decimal = decimal
  }

  read({ line, cells }: Row): ReportedLevel {
    const level: ReportedLevel = { place: { line } }
    const position: Partial<Displacement> = {}
    let time: number | null = null
    for (const column of this.columns) {
      const cell = cells[column.index]
      if (cell === '') continue
      if (column.quantity === 'time') {
        time = this.readTime(cell, column, line)
        continue
      }
      const value = this.readNumber(cell, column, line)
      if (value === null) continue
      if (column.quantity === 'latitude' || column.quantity === 'longitude') {
        position[column.quantity] = value
      } else level[column.quantity] = value
    }
    this.times.push(time)
    this.positions.push(position)
    return level
  }

  /** When and where the sounding began; tells levels how long and how far from there they are. */
  origin(levels: readonly ReportedLevel[]) {
    const start = this.times.find((time) => time !== null) ?? null
    if (start !== null && this.times.some((time) => time !== null && time !== start)) {
      for (const [index, level] of levels.entries()) {
        const time = this.times[index]
        if (time !== null) level.elapsed ??= time - start
      }
    }
    const site = this.positions.find(isWhole) ?? null
    if (site && this.positions.some((position) => isWhole(position) && !isSame(position, site))) {
      for (const [index, level] of levels.entries()) {
        const position = this.positions[index]
        if (!isWhole(position)) continue
        level.displacement = {
          latitude: position.latitude - site.latitude,
          longitude: position.longitude - site.longitude,
        }
      }
    }
    return {
      validAt: start,
      latitude: site?.latitude ?? null,
      longitude: site?.longitude ?? null,
    }
  }

  private readNumber(cell: string, column: Column, line: number): number | null {
    const plain = this.decimal === ',' ? cell.replace(',', '.') : cell
    const value = /^[+-]?(\d+\.?\d*|\.\d+)(e[+-]?\d{1,3})?$/i.test(plain) ? Number(plain) : NaN
    if (value === MISSING) return null
    if (Number.isFinite(value)) {
      const bound =
        column.quantity === 'latitude' ? 90 : column.quantity === 'longitude' ? 360 : Infinity
      if (Math.abs(value) <= bound) return column.toSi(value)
      this.refuse(line, `${column.heading} ${value}: from -${bound} to ${bound} can be used`)
      return null
    }
    this.refuse(
      line,
      `'${shorten(cell)}' under '${column.heading}' is not a number; leave it empty or write ${MISSING} where a value is missing`,
    )
    return null
  }

  private readTime(cell: string, column: Column, line: number): number | null {
    if (Number(cell) === MISSING) return null
    const time = parseTime(cell)
    if (!time) {
      this.refuse(
        line,
        `'${shorten(cell)}' under '${column.heading}' is not a time such as 2026-12-05T09:00:00Z`,
      )
      return null
    }
    if (!time.zoned) this.timeWithoutZone = true
    return time.seconds
  }

  private refuse(line: number, message: string): void {
    this.problems.push({ line, message })
  }
}

function isWhole(position: Partial<Displacement>): position is Displacement {
  return position.latitude !== undefined && position.longitude !== undefined
}

function isSame(a: Displacement, b: Displacement): boolean {
  return a.latitude === b.latitude && a.longitude === b.longitude
}

/** Text that may be long, for a message. */
export function shorten(text: string, most = 60): string {
  return text.length > most ? `${text.slice(0, most)}…` : text
}
