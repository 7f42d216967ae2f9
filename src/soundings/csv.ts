import { CsvError, parse } from 'csv-parse/sync'
import { BadSounding, MOST_PROBLEMS, type SoundingProblem } from './badSounding.ts'
import { readHeading, understoodHeadings, type Quantity } from './csvHeadings.ts'
import { parseTime } from './parseTime.ts'
import { type Notes } from './notes.ts'
import { MOST_LEVELS, type ReportedLevel, type ReportedSounding } from './profile.ts'

/** Characters a line may have; a longer one is no row of a sounding. */
const LONGEST_LINE = 20_000

/** Columns a row may have. */
const MOST_COLUMNS = 500

const MISSING = -9999

interface Column {
  index: number
  heading: string
  quantity: Quantity
  toSi: (value: number) => number
}

interface Row {
  line: number
  cells: string[]
}

/**
 * Reads a sounding in CSV: one line of headings, then one line a level; separated by comma,
 * semicolon or tab. Throws `BadSounding` with line numbers.
 */
export function readCsv(text: string, notes: Notes): ReportedSounding {
  const delimiter = delimiterOf(text)
  const rows = parseRows(text, delimiter)
  const head = rows.shift()
  if (!head) throw refusal([{ message: 'no line of headings' }])
  const columns = readHeadings(head, notes)
  const decimal = delimiter === ',' ? '.' : ','
  const table = new Table(columns, decimal)

  const levels: ReportedLevel[] = []
  for (const row of rows) {
    if (row.cells.length !== head.cells.length) {
      notes.add(`row without ${head.cells.length} cells dropped`, { line: row.line })
      continue
    }
    levels.push(table.read(row))
    if (table.problems.length >= MOST_PROBLEMS) break
  }
  if (table.problems.length > 0) throw refusal(table.problems)
  if (table.timeWithoutZone) notes.add('times without a zone read as UTC')
  return { name: null, station: null, ...table.origin(levels), levels, place: { line: head.line } }
}

/** Turns rows into levels, and gathers what stands for the whole sounding on the way. */
class Table {
  readonly problems: SoundingProblem[] = []
  timeWithoutZone = false
  private readonly columns: readonly Column[]
  private readonly decimal: string
  private readonly times: (number | null)[] = []
  private latitude: number | null = null
  private longitude: number | null = null

  constructor(columns: readonly Column[], decimal: string) {
    this.columns = columns
    this.decimal = decimal
  }

  read({ line, cells }: Row): ReportedLevel {
    const level: ReportedLevel = { place: { line } }
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
      if (column.quantity === 'latitude') this.latitude ??= value
      else if (column.quantity === 'longitude') this.longitude ??= value
      else level[column.quantity] = value
    }
    this.times.push(time)
    return level
  }

  /** When and where the sounding began; gives levels the time since then where a clock tells it. */
  origin(levels: readonly ReportedLevel[]) {
    const first = this.times.find((time) => time !== null) ?? null
    if (first !== null && this.times.some((time) => time !== null && time !== first)) {
      for (const [index, level] of levels.entries()) {
        const time = this.times[index]
        if (time !== null) level.elapsed ??= time - first
      }
    }
    const whole = this.latitude !== null && this.longitude !== null
    return {
      validAt: first,
      latitude: whole ? this.latitude : null,
      longitude: whole ? this.longitude : null,
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

function readHeadings(head: Row, notes: Notes): Column[] {
  const columns: Column[] = []
  const problems: SoundingProblem[] = []
  const unused: string[] = []
  for (const [index, cell] of head.cells.entries()) {
    const heading = shorten(cell)
    const meaning = readHeading(heading)
    if (meaning.kind === 'unused') {
      if (heading !== '') unused.push(`'${heading}'`)
    } else if (meaning.kind === 'unit-unknown') {
      const message = `the unit of heading '${heading}' cannot be told`
      problems.push({ line: head.line, message })
    } else {
      const { quantity, toSi } = meaning
      const earlier = columns.find((column) => column.quantity === quantity)
      if (earlier) {
        notes.add(`heading '${heading}' ignored: '${earlier.heading}' tells the same`, {
          line: head.line,
        })
      } else columns.push({ index, heading, quantity, toSi })
    }
  }

  const has = (quantity: Quantity) => columns.some((column) => column.quantity === quantity)
  if (problems.length === 0 && !has('pressure') && !has('geopotentialHeight') && !has('altitude')) {
    problems.push({ line: head.line, message: 'no heading gives a pressure, height or altitude' })
  }
  if (problems.length > 0) {
    const understood = columns.map(({ heading }) => `'${heading}'`).join(', ') || 'none'
    const message = `headings understood here: ${understood}; headings that are understood, also in other units: ${understoodHeadings.join(', ')}`
    throw refusal([...problems.slice(0, MOST_PROBLEMS - 1), { line: head.line, message }])
  }
  if (unused.length > 0) {
    notes.add(`headings not used: ${shorten(unused.join(', '), 300)}`, { line: head.line })
  }
  return columns
}

/** The separator the first line that is no comment has most of. */
function delimiterOf(text: string): string {
  const line = /^(?!\s*#).*\S.*$/m.exec(text.slice(0, 10 * LONGEST_LINE))?.[0] ?? ''
  const bare = line.replace(/"[^"]*"/g, '')
  const counts = [',', ';', '\t'].map((mark) => ({ mark, count: bare.split(mark).length }))
  return counts.reduce((most, next) => (next.count > most.count ? next : most)).mark
}

function parseRows(text: string, delimiter: string): Row[] {
  let parsed: unknown
  try {
    parsed = parse(text, {
      delimiter,
      comment: '#',
      comment_no_infix: true,
      info: true,
      max_record_size: LONGEST_LINE,
      relax_column_count: true,
      relax_quotes: true,
      skip_empty_lines: true,
      to: MOST_LEVELS + 2,
      trim: true,
    })
  } catch (error) {
    if (error instanceof CsvError) throw refusal([{ message: csvMessage(error) }])
    throw error
  }
  const rows = parsed as { info: { lines: number }; record: string[] }[]
  if (rows.length > MOST_LEVELS + 1) {
    throw refusal([{ message: `more than ${MOST_LEVELS} levels; up to that many can be read` }])
  }
  if (rows.length > 0 && rows[0].record.length > MOST_COLUMNS) {
    throw refusal([{ message: `more than ${MOST_COLUMNS} columns; up to that many can be read` }])
  }
  return rows.map(({ info, record }) => ({ line: info.lines, cells: record }))
}

function csvMessage(error: CsvError): string {
  if (error.code === 'CSV_MAX_RECORD_SIZE') {
    return `a line of more than ${LONGEST_LINE} characters is no line of a sounding`
  }
  return `not CSV: ${shorten(error.message, 200)}`
}

function shorten(text: string, most = 60): string {
  return text.length > most ? `${text.slice(0, most)}…` : text
}

function refusal(problems: readonly SoundingProblem[]): BadSounding {
  return new BadSounding('unparseable', problems.slice(0, MOST_PROBLEMS))
}
