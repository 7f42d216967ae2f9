import { wrapLongitude } from '../physics/earth.ts'
import { type EarthShape, readEarthShape } from './earthShape.ts'
import { damaged, UnsupportedGrib } from './gribError.ts'
import { type Grid, type GridPlace } from './grid.ts'
import { type Octets } from './octets.ts'
import { readScanning, type Scanning } from './scanning.ts'

const MICRODEGREE = (Math.PI / 180) * 1e-6

/** Flag table 3.3, bit 5: vector components are along the grid's x and y axes. */
const ALONG_GRID = 0x08

/**
 * The conformal conic projection of the sphere or the ellipsoid: Lambert's, and with a cone of ±1 the
 * polar stereographic one. The x axis points east and the y axis north at the central longitude.
 * Snyder, Map Projections: A Working Manual (USGS Professional Paper 1395), ch. 15 and 21.
 */
export class ConformalCone {
  /** Snyder's n: how much of a circle the cone's full turn takes; negative for an apex in the south. */
  readonly cone: number
  private readonly eccentricity: number
  private readonly scale: number
  private readonly centralLongitude: number

  /** `trueParallel`: a latitude, radians, where the plane has the earth's scale. */
  constructor(earth: EarthShape, cone: number, trueParallel: number, centralLongitude: number) {
    this.cone = cone
    this.eccentricity = earth.eccentricity
    this.centralLongitude = centralLongitude
    const { eccentricity: e } = earth
    const atPole = Math.abs(trueParallel) > Math.PI / 2 - 1e-9
    const ratio = atPole
      ? 2 / Math.sqrt((1 + e) ** (1 + e) * (1 - e) ** (1 - e)) // m/t at the pole, eq. 21-33
      : parallelRadius(trueParallel, e) * Math.exp(cone * isometricLatitude(trueParallel, e))
    this.scale = (earth.semiMajorAxis * ratio) / cone // a·F, eq. 15-10 and 21-34
  }

  /** Plane coordinates in m of a latitude and longitude in radians; y is 0 at the apex. */
  project(latitude: number, longitude: number, out: { x: number; y: number }): void {
    const radius =
      this.scale * Math.exp(-this.cone * isometricLatitude(latitude, this.eccentricity)) // eq. 15-7
    const angle = this.angle(longitude)
    out.x = radius * Math.sin(angle) // eq. 14-1
    out.y = -radius * Math.cos(angle) // eq. 14-2 with ρ₀ = 0
  }

  /** The inverse of `project`. */
  unproject(x: number, y: number): { latitude: number; longitude: number } {
    const sign = Math.sign(this.cone)
    const radius = sign * Math.hypot(x, y) // eq. 14-10
    const angle = Math.atan2(sign * x, -sign * y) // eq. 14-11
    const isometric = (radius / this.scale) ** (1 / this.cone) // eq. 15-11
    const e = this.eccentricity
    let latitude = Math.PI / 2 - 2 * Math.atan(isometric)
    for (let round = 0; e > 0 && round < 12; round++) {
      const sine = e * Math.sin(latitude)
      latitude = Math.PI / 2 - 2 * Math.atan(isometric * ((1 - sine) / (1 + sine)) ** (e / 2)) // eq. 7-9
    }
    return { latitude, longitude: wrapLongitude(this.centralLongitude + angle / this.cone) }
  }

  /** Angle in radians, anticlockwise, from east to the x axis at a longitude. */
  turn(longitude: number): number {
    return -this.angle(longitude)
  }

  private angle(longitude: number): number {
    return this.cone * wrapLongitude(longitude - this.centralLongitude) // eq. 14-4
  }
}

/** Snyder's n of the cone through two parallels of true scale, radians, eq. 15-8. */
export function coneThrough(first: number, second: number, earth: EarthShape): number {
  if (Math.abs(first - second) < 1e-9) return Math.sin(first)
  const e = earth.eccentricity
  const parallels = Math.log(parallelRadius(first, e) / parallelRadius(second, e))
  return parallels / (isometricLatitude(second, e) - isometricLatitude(first, e))
}

/** Isometric latitude, eq. 3-7: Snyder's t of eq. 15-9 is the exponential of its negative. */
function isometricLatitude(latitude: number, eccentricity: number): number {
  const sine = Math.sin(latitude)
  const onSphere = inverseTanh(sine)
  return eccentricity === 0 ? onSphere : onSphere - eccentricity * inverseTanh(eccentricity * sine)
}

/** Twice as fast as Math.atanh, which is exact near 0, where this is to 1e-16 all the same. */
function inverseTanh(x: number): number {
  return 0.5 * Math.log((1 + x) / (1 - x))
}

/** Snyder's m, eq. 14-15: radius of a parallel over the semi-major axis. */
function parallelRadius(latitude: number, eccentricity: number): number {
  return Math.cos(latitude) / Math.sqrt(1 - (eccentricity * Math.sin(latitude)) ** 2)
}

/** Grid definition templates 3.20 and 3.30: equal steps in the plane of a conformal cone. */
export class ConicGrid implements Grid {
  readonly columns: number
  readonly rows: number
  readonly wraps = false
  readonly scanning: Scanning
  readonly windsAlongGrid: boolean
  readonly description: string
  private readonly projection: ConformalCone
  private readonly first = { x: 0, y: 0 }
  private readonly columnStep: number
  private readonly rowStep: number
  private readonly plane = { x: 0, y: 0 }

  /** `steps` in m along the scanning directions; `first` in radians. */
  constructor(
    projection: ConformalCone,
    size: { columns: number; rows: number },
    scanning: Scanning,
    first: { latitude: number; longitude: number },
    steps: { column: number; row: number },
    description: string,
    alongGrid: boolean,
  ) {
    this.projection = projection
    this.columns = size.columns
    this.rows = size.rows
    this.scanning = scanning
    this.windsAlongGrid = alongGrid
    projection.project(first.latitude, first.longitude, this.first)
    this.columnStep = scanning.eastward ? steps.column : -steps.column
    this.rowStep = scanning.northward ? steps.row : -steps.row
    this.description = description
  }

  locate(latitude: number, longitude: number, out: GridPlace): void {
    this.projection.project(latitude, longitude, this.plane)
    out.column = (this.plane.x - this.first.x) / this.columnStep
    out.row = (this.plane.y - this.first.y) / this.rowStep
  }

  position(column: number, row: number): { latitude: number; longitude: number } {
    return this.projection.unproject(
      this.first.x + column * this.columnStep,
      this.first.y + row * this.rowStep,
    )
  }

  turn(column: number, row: number): number {
    return this.projection.turn(this.position(column, row).longitude)
  }
}

/**
 * Reads grid definition template 3.20 or 3.30, which share octets 31 to 65. The steps of a Lambert grid
 * are taken in the plane whatever its LaD, as the decoders in general use do.
 */
export function readConicGrid(
  section: Octets,
  columns: number,
  rows: number,
  kind: 'polar' | 'lambert',
): ConicGrid {
  const earth = readEarthShape(section)
  const angle = (octet: number) => section.s32(octet) * MICRODEGREE
  const first = { latitude: angle(39), longitude: angle(43) }
  const steps = { column: section.u32(56) / 1000, row: section.u32(60) / 1000 }
  const centre = section.u8(64) // flag table 3.5
  if (centre & 0x40) throw new UnsupportedGrib('a bipolar projection')
  const south = (centre & 0x80) !== 0

  let cone: number
  let trueParallel: number
  if (kind === 'polar') {
    cone = south ? -1 : 1
    trueParallel = cone * Math.abs(angle(48))
  } else {
    trueParallel = angle(66)
    const second = angle(70)
    if (!(Math.abs(trueParallel) < 1.57 && Math.abs(second) < 1.57)) {
      throw damaged('a Lambert grid with a parallel at a pole')
    }
    cone = coneThrough(trueParallel, second, earth)
  }
  const sound =
    Math.abs(first.latitude) <= Math.PI / 2 &&
    Math.abs(first.latitude + (Math.sign(cone) * Math.PI) / 2) > 1e-3 &&
    Math.abs(trueParallel) <= Math.PI / 2 &&
    Math.abs(cone) > 1e-3 &&
    steps.column > 0 &&
    steps.row > 0
  if (!sound) throw damaged('a projected grid that is not on the earth')

  const name = kind === 'polar' ? 'polar stereographic' : 'Lambert conformal'
  const kilometres = (metres: number) => Number((metres / 1000).toFixed(3))
  return new ConicGrid(
    new ConformalCone(earth, cone, trueParallel, angle(52)),
    { columns, rows },
    readScanning(section.u8(65)),
    first,
    steps,
    `${name}, ${kilometres(steps.column)} km by ${kilometres(steps.row)} km`,
    (section.u8(47) & ALONG_GRID) !== 0,
  )
}
