import { type Column, type WindDeparture } from '../physics/column.ts'

/** Height over which the wind's error grows by its sea-level value, m: to twice at 100 hPa. An assumption. */
const GROWTH_HEIGHT = 16_000

/** The error grows no more above this altitude, m. An assumption. */
const GROWTH_TOP = 32_000

/** Errors this far apart in height, m, correlate by exp(−½). An assumption. */
const CORRELATION_HEIGHT = 2000

/** Root mean square of 1 + z/GROWTH_HEIGHT from sea level to 16 km, where 100 hPa is. */
const MEAN_GROWTH = Math.sqrt(7 / 3)

/** Most modes kept: two coordinates of the quasi-random sequence go to each. */
const MOST_MODES = 20

/**
 * Standard deviation of each wind component's error at an altitude in m, for a root-mean-square vector
 * error of 1 m/s between 1000 and 100 hPa.
 */
export function windErrorShape(altitude: number): number {
  const height = Math.min(GROWTH_TOP, Math.max(0, altitude))
  return (1 + height / GROWTH_HEIGHT) / MEAN_GROWTH / Math.SQRT2
}

/**
 * The error of a column's wind as a sum of a few modes with standard normal weights, each component
 * with its own: correlated between levels, growing with height.
 */
export class WindErrorModes {
  readonly count: number
  /** Slabs [first, end) hold the error; others have none. */
  private readonly first: number
  private readonly end: number
  /** Value of every mode in each slab, slab by slab, m/s. */
  private readonly values: Float64Array

  /** `vectorError`: root mean square between 1000 and 100 hPa, m/s. Altitudes in m. */
  constructor(column: Column, bottom: number, top: number, vectorError: number) {
    this.first = Math.max(0, column.slabAt(bottom))
    this.end = Math.min(column.count, column.slabAt(top) + 1)
    const altitudes = Float64Array.from(
      { length: this.end - this.first },
      (_, i) => column.altitude(this.first + i) + column.thickness / 2,
    )
    const deviations = altitudes.map((altitude) => vectorError * windErrorShape(altitude))
    const modes = vectorError > 0 ? leadingModes(altitudes, deviations) : []
    this.count = modes.length
    this.values = new Float64Array(this.count * altitudes.length)
    modes.forEach((mode, m) => {
      mode.forEach((value, slab) => (this.values[slab * this.count + m] = value))
    })
  }

  /** Fills `out` with the error whose weights stand in `weights` from `at` on: east, north, mode by mode. */
  fill(weights: Float64Array, at: number, out: WindDeparture): void {
    const { first, end, values, count } = this
    let place = 0
    for (let slab = first; slab < end; slab++) {
      let east = 0
      let north = 0
      for (let weight = at; weight < at + 2 * count; weight += 2) {
        const value = values[place++]
        east += weights[weight] * value
        north += weights[weight + 1] * value
      }
      out.east[slab] = east
      out.north[slab] = north
    }
  }

  /** What each mode with a weight of 1 adds up to over `residence` seconds in each slab, m. */
  drifts(residence: Float64Array): Float64Array {
    const { first, end, values, count } = this
    const drifts = new Float64Array(count)
    for (let slab = first; slab < end; slab++) {
      for (let mode = 0; mode < count; mode++) {
        drifts[mode] += residence[slab] * values[(slab - first) * count + mode]
      }
    }
    return drifts
  }
}

/**
 * The columns of a pivoted Cholesky factor of the covariance, largest pivots first, until 99 % of the
 * variance is in them (Harbrecht, Peters and Schneider, Appl. Numer. Math. 62, 2012, p. 428, algorithm 1).
 */
function leadingModes(altitudes: Float64Array, deviations: Float64Array): Float64Array[] {
  const left = deviations.map((deviation) => deviation * deviation)
  const total = sum(left)
  const modes: Float64Array[] = []
  while (modes.length < MOST_MODES && sum(left) > 0.01 * total) {
    const pivot = left.indexOf(Math.max(...left))
    const root = Math.sqrt(left[pivot])
    const mode = altitudes.map((altitude, i) => {
      const apart = (altitude - altitudes[pivot]) / CORRELATION_HEIGHT
      const covariance = deviations[i] * deviations[pivot] * Math.exp(-(apart * apart) / 2)
      return modes.reduce((rest, done) => rest - done[i] * done[pivot], covariance) / root
    })
    for (let i = 0; i < left.length; i++) left[i] = Math.max(0, left[i] - mode[i] * mode[i])
    left[pivot] = 0
    modes.push(mode)
  }
  return modes
}

function sum(values: Float64Array): number {
  return values.reduce((total, value) => total + value, 0)
}
