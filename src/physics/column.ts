import { emptyAirState, viscosity, type AirState, type ColumnAir } from './air.ts'
import { CEILING } from './constants.ts'
import { gravity } from './earth.ts'

/** Altitude of the lowest slab's bottom, m: below every shore and salt lake. */
const COLUMN_BASE = -1000

/** Thickness of a slab, m. Halving it moves a landing by metres (tests/physics/flight.test.ts). */
const SLAB_THICKNESS = 400

/** Nodes of the two-point Gauss-Legendre rule on [0, 1]. Abramowitz and Stegun, table 25.4. */
const GAUSS = [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)] as const

/**
 * One column of air tabulated once, to be flown in many times. It is cut into slabs of equal
 * thickness; each keeps its true mean over every kink of the air within, so that the drift through a
 * whole slab loses none of the wind's detail.
 */
export class Column {
  readonly air: ColumnAir
  readonly thickness: number
  /** Number of slabs; slab k lies between edges k and k + 1. */
  readonly count: number

  /** At the edges: count + 1 values. */
  readonly edgeTemperature: Float64Array
  readonly edgePressure: Float64Array
  readonly edgeDensity: Float64Array
  readonly edgeGravity: Float64Array
  /** A third of the way down from each slab's top, where the descent looks: count values. */
  readonly thirdDensity: Float64Array
  readonly thirdGravity: Float64Array
  /** Greatest difference of wind within each slab, m/s. */
  readonly windRange: Float64Array

  private readonly means: Float64Array

  constructor(air: ColumnAir, thickness = SLAB_THICKNESS) {
    this.air = air
    this.thickness = thickness
    this.count = Math.round((CEILING - COLUMN_BASE) / thickness)
    const { count } = this
    this.edgeTemperature = new Float64Array(count + 1)
    this.edgePressure = new Float64Array(count + 1)
    this.edgeDensity = new Float64Array(count + 1)
    this.edgeGravity = new Float64Array(count + 1)
    this.thirdDensity = new Float64Array(count)
    this.thirdGravity = new Float64Array(count)
    this.windRange = new Float64Array(count)
    this.means = new Float64Array(count * 6)

    const state = emptyAirState()
    for (let edge = 0; edge <= count; edge++) {
      air.sampleAltitude(this.altitude(edge), state)
      this.edgeTemperature[edge] = state.temperature
      this.edgePressure[edge] = state.pressure
      this.edgeDensity[edge] = state.density
      this.edgeGravity[edge] = gravity(this.altitude(edge))
    }
    for (let slab = 0; slab < count; slab++) {
      const third = this.altitude(slab + 1) - thickness / 3
      air.sampleAltitude(third, state)
      this.thirdDensity[slab] = state.density
      this.thirdGravity[slab] = gravity(third)
      this.windRange[slab] = windRange(air, this.altitude(slab), this.altitude(slab + 1))
      meanAir(air, this.altitude(slab), this.altitude(slab + 1), state)
      this.means.set(
        [
          state.pressure,
          state.temperature,
          state.density,
          state.viscosity,
          state.windEast,
          state.windNorth,
        ],
        slab * 6,
      )
    }
  }

  /** Altitude of an edge, m. */
  altitude(edge: number): number {
    return COLUMN_BASE + edge * this.thickness
  }

  /** The slab that holds an altitude in m; an altitude on an edge belongs to the slab above. */
  slabAt(altitude: number): number {
    return Math.floor((altitude - COLUMN_BASE) / this.thickness)
  }

  /** The slab below an altitude in m: the one that holds it, but an edge belongs to the slab below. */
  slabBelow(altitude: number): number {
    return Math.ceil((altitude - COLUMN_BASE) / this.thickness) - 1
  }

  /** Fills `out` with the mean air between two altitudes, m; a whole slab's stands in the table. */
  mean(from: number, to: number, out: AirState): void {
    const slab = this.slabAt(from)
    if (from !== this.altitude(slab) || to !== this.altitude(slab + 1)) {
      meanAir(this.air, from, to, out)
      return
    }
    const { means } = this
    const at = slab * 6
    out.pressure = means[at]
    out.temperature = means[at + 1]
    out.density = means[at + 2]
    out.viscosity = means[at + 3]
    out.windEast = means[at + 4]
    out.windNorth = means[at + 5]
  }
}

const node = emptyAirState()

/**
 * Fills `out` with the mean of the air over [from, to] m: arithmetic for temperature and wind, geometric
 * for pressure and density, which are near exponential. Exact for wind, which is linear between breaks.
 */
function meanAir(air: ColumnAir, from: number, to: number, out: AirState): void {
  const breaks = air.breakAltitudes
  let next = firstAbove(breaks, from)
  let temperature = 0
  let logPressure = 0
  let logDensity = 0
  let windEast = 0
  let windNorth = 0
  let bottom = from
  do {
    const top = next < breaks.length && breaks[next] < to ? breaks[next] : to
    const weight = (top - bottom) / (to - from) / 2
    for (const place of GAUSS) {
      air.sampleAltitude(bottom + place * (top - bottom), node)
      temperature += weight * node.temperature
      logPressure += weight * Math.log(node.pressure)
      logDensity += weight * Math.log(node.density)
      windEast += weight * node.windEast
      windNorth += weight * node.windNorth
    }
    bottom = top
    next++
  } while (bottom < to)
  out.temperature = temperature
  out.pressure = Math.exp(logPressure)
  out.density = Math.exp(logDensity)
  out.viscosity = viscosity(temperature)
  out.windEast = windEast
  out.windNorth = windNorth
}

/** Greatest difference of wind, m/s, between the bottom, the top and the breaks of [from, to] m. */
function windRange(air: ColumnAir, from: number, to: number): number {
  const inside = air.breakAltitudes.filter((altitude) => altitude > from && altitude < to)
  let [west, east, south, north] = [Infinity, -Infinity, Infinity, -Infinity]
  for (const altitude of [from, ...inside, to]) {
    air.sampleAltitude(altitude, node)
    west = Math.min(west, node.windEast)
    east = Math.max(east, node.windEast)
    south = Math.min(south, node.windNorth)
    north = Math.max(north, node.windNorth)
  }
  return Math.hypot(east - west, north - south)
}

/** Index of the first of ascending `values` above `value`. */
function firstAbove(values: Float64Array, value: number): number {
  let low = 0
  let high = values.length
  while (low < high) {
    const middle = (low + high) >> 1
    if (values[middle] > value) high = middle
    else low = middle + 1
  }
  return low
}
