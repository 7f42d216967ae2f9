import { damaged } from './gribError.ts'
import { type Grid, type GridPlace } from './grid.ts'
import { type Octets } from './octets.ts'
import { readScanning, type Scanning } from './scanning.ts'

const RADIAN = Math.PI / 180
const MISSING = 0xffff_ffff

/** Octet 55, bits 3 and 4: the increments along i and j are given. Flag table 3.3. */
const COLUMN_STEP_GIVEN = 0x20
const ROW_STEP_GIVEN = 0x10

/** How far, as a share of a step, a grid's steps may miss the whole circle and still close it. */
const CLOSURE = 0.02

/** Grid definition template 3.0: points at equal steps of latitude and longitude. */
export class LatLonGrid implements Grid {
  readonly columns: number
  readonly rows: number
  readonly wraps: boolean
  readonly scanning: Scanning
  /** Latitude and longitude are the axes, so winds along them are towards east and north. */
  readonly windsAlongGrid = false
  readonly description: string

  private readonly firstLatitude: number
  private readonly firstLongitude: number
  private readonly rowStep: number
  private readonly columnStep: number
  /** Columns around the whole circle, and the column from which the first is the nearer edge. */
  private readonly circle: number
  private readonly turningColumn: number

  /** Angles in radians; steps carry the sign of the scanning direction. */
  constructor(
    columns: number,
    rows: number,
    scanning: Scanning,
    first: { latitude: number; longitude: number },
    columnStep: number,
    rowStep: number,
  ) {
    this.columns = columns
    this.rows = rows
    this.scanning = scanning
    this.firstLatitude = first.latitude
    this.firstLongitude = first.longitude
    this.columnStep = columnStep
    this.rowStep = rowStep
    this.circle = (2 * Math.PI) / Math.abs(columnStep)
    this.wraps = Math.abs(this.circle - columns) < CLOSURE
    this.turningColumn = this.wraps ? this.circle : (columns - 1 + this.circle) / 2
    const degrees = (angle: number) => Number((Math.abs(angle) / RADIAN).toFixed(6))
    this.description = `latitude-longitude, ${degrees(columnStep)}° by ${degrees(rowStep)}°`
  }

  locate(latitude: number, longitude: number, out: GridPlace): void {
    let column = (longitude - this.firstLongitude) / this.columnStep
    column -= this.circle * Math.floor(column / this.circle)
    out.column = column > this.turningColumn ? column - this.circle : column
    out.row = (latitude - this.firstLatitude) / this.rowStep
  }

  position(column: number, row: number): { latitude: number; longitude: number } {
    return {
      latitude: this.firstLatitude + row * this.rowStep,
      longitude: this.firstLongitude + column * this.columnStep,
    }
  }

  turn(): number {
    return 0
  }
}

/** Reads grid definition template 3.0. */
export function readLatLonGrid(section: Octets, columns: number, rows: number): LatLonGrid {
  const scanning = readScanning(section.u8(72))
  const flags = section.u8(55)
  // Angles are in units of basic angle / subdivisions, 10⁻⁶ degrees where none is given (note 1).
  const basic = section.u32(39)
  const subdivisions = section.u32(43)
  const given = basic !== 0 && basic !== MISSING && subdivisions !== 0 && subdivisions !== MISSING
  const unit = (given ? basic / subdivisions : 1e-6) * RADIAN

  const first = { latitude: section.s32(47) * unit, longitude: section.s32(51) * unit }
  const last = { latitude: section.s32(56) * unit, longitude: section.s32(60) * unit }
  for (const { latitude, longitude } of [first, last]) {
    if (!(Math.abs(latitude) <= Math.PI / 2 + unit && Math.abs(longitude) <= 4 * Math.PI)) {
      throw damaged('a grid with a corner off the earth')
    }
  }
  const north = (last.latitude - first.latitude) * (scanning.northward ? 1 : -1)
  if (!(north > 0)) throw damaged('grid rows that run against their scanning direction')
  let east = (last.longitude - first.longitude) * (scanning.eastward ? 1 : -1)
  east -= 2 * Math.PI * Math.floor(east / (2 * Math.PI))
  if (east < unit / 2) east = 2 * Math.PI

  // The corners give finer steps than the increments, which are rounded to the unit of angle.
  const columnStep = east / (columns - 1)
  const rowStep = north / (rows - 1)
  const contradicts = (step: number, octet: number) =>
    section.u32(octet) !== MISSING &&
    Math.abs(section.u32(octet) * unit - step) > unit + 0.01 * step
  if (
    ((flags & COLUMN_STEP_GIVEN) !== 0 && contradicts(columnStep, 64)) ||
    ((flags & ROW_STEP_GIVEN) !== 0 && contradicts(rowStep, 68))
  ) {
    throw damaged('grid steps that contradict the corners')
  }
  return new LatLonGrid(
    columns,
    rows,
    scanning,
    first,
    scanning.eastward ? columnStep : -columnStep,
    scanning.northward ? rowStep : -rowStep,
  )
}
