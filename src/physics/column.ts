import { emptyAirState, viscosity, type AirState, type ColumnAir } from './air.ts'
import { Bends } from './bends.ts'
import { CEILING } from './constants.ts'
import { gravity } from './earth.ts'
import { firstAbove } from './firstAbove.ts'
import { RiseTable } from './riseTable.ts'

/** Altitude of the lowest slab's bottom, m: below every shore and salt lake. */
const COLUMN_BASE = -1000

/** Thickness of a slab, m. Halving it moves a landing by metres (tests/physics/flight.test.ts). */
const SLAB_THICKNESS = 400

/** Nodes of the two-point Gauss-Legendre rule on [0, 1]. Abramowitz and Stegun, table 25.4. */
const GAUSS = [0.5 - Math.sqrt(1 / 12), 0.5 + Math.sqrt(1 / 12)] as const

interface MeanPart extends AirState {
  from: number
  to: number
}

/** A departure from a column's wind, m/s, held over each slab: one value for each. */
export interface WindDeparture {
  readonly east: Float64Array
  readonly north: Float64Array
}

/**
 * One column of air tabulated once, to be flown in many times. It is cut into slabs of equal
 * thickness; each keeps its true mean over every kink of the air within, so that the drift through a
 * whole slab loses none of the wind's detail.
 */
export class Column {
  readonly air: ColumnAir
  /** What a load comes down in: this column unless another was given, of the same slabs. */
  readonly descent: Column
  readonly thickness: number
  /** Number of slabs; slab k lies between edges k and k + 1. */
  readonly count: number

  /** At the edges: count + 1 values. */
  readonly edgeTemperature: Float64Array
  readonly edgePressure: Float64Array
  readonly edgeDensity: Float64Array
  readonly edgeGravity: Float64Array
  readonly edgeWindEast: Float64Array
  readonly edgeWindNorth: Float64Array
  /** A third of the way down from each slab's top, where the descent looks: count values. */
  readonly thirdDensity: Float64Array
  readonly thirdGravity: Float64Array
  /** Mean wind over each slab, m/s: count values. */
  readonly windEast: Float64Array
  readonly windNorth: Float64Array

  private readonly means: Float64Array
  /** The part of each slab asked for last: many flights leave from, or land at, one altitude. */
  private readonly parts: (MeanPart | undefined)[]
  private riseTable: RiseTable | undefined
  private bendTable: Bends | undefined

  constructor(air: ColumnAir, thickness = SLAB_THICKNESS, descent?: Column) {
    this.air = air
    this.descent = descent ?? this
    this.thickness = thickness
    this.count = Math.round((CEILING - COLUMN_BASE) / thickness)
    const { count } = this
    this.edgeTemperature = new Float64Array(count + 1)
    this.edgePressure = new Float64Array(count + 1)
    this.edgeDensity = new Float64Array(count + 1)
    this.edgeGravity = new Float64Array(count + 1)
    this.edgeWindEast = new Float64Array(count + 1)
    this.edgeWindNorth = new Float64Array(count + 1)
    this.thirdDensity = new Float64Array(count)
    this.thirdGravity = new Float64Array(count)
    this.windEast = new Float64Array(count)
    this.windNorth = new Float64Array(count)
    this.means = new Float64Array(count * 4)
    this.parts = Array<undefined>(count).fill(undefined)

    const state = emptyAirState()
    for (let edge = 0; edge <= count; edge++) {
      air.sampleAltitude(this.altitude(edge), state)
      this.edgeTemperature[edge] = state.temperature
      this.edgePressure[edge] = state.pressure
      this.edgeDensity[edge] = state.density
      this.edgeGravity[edge] = gravity(this.altitude(edge))
      this.edgeWindEast[edge] = state.windEast
      this.edgeWindNorth[edge] = state.windNorth
    }
    for (let slab = 0; slab < count; slab++) {
      const third = this.altitude(slab + 1) - thickness / 3
      air.sampleAltitude(third, state)
      this.thirdDensity[slab] = state.density
      this.thirdGravity[slab] = gravity(third)
      meanAir(air, this.altitude(slab), this.altitude(slab + 1), state)
      this.means.set([state.pressure, state.temperature, state.density, state.viscosity], slab * 4)
      this.windEast[slab] = state.windEast
      this.windNorth[slab] = state.windNorth
    }
  }

  /** What an ascent of gas warmer than the air by `temperatureOffset` K needs of this air. */
  rise(temperatureOffset: number): RiseTable {
    if (this.riseTable?.temperatureOffset !== temperatureOffset) {
      this.riseTable = new RiseTable(this, temperatureOffset)
    }
    return this.riseTable
  }

  /** What recording a path through this air needs of it. */
  get bends(): Bends {
    return (this.bendTable ??= new Bends(this))
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

  /** Fills `out` with the air at an altitude, m; an edge's stands in the table. */
  at(altitude: number, out: AirState): void {
    const edge = (altitude - COLUMN_BASE) / this.thickness
    if (!Number.isInteger(edge) || edge < 0 || edge > this.count) {
      this.air.sampleAltitude(altitude, out)
      return
    }
    out.pressure = this.edgePressure[edge]
    out.temperature = this.edgeTemperature[edge]
    out.density = this.edgeDensity[edge]
    out.viscosity = viscosity(out.temperature)
    out.windEast = this.edgeWindEast[edge]
    out.windNorth = this.edgeWindNorth[edge]
  }

  /** Fills `out` with the mean air between two altitudes, m; a whole slab's stands in the table. */
  mean(from: number, to: number, out: AirState): void {
    const slab = this.slabAt(from)
    if (from !== this.altitude(slab) || to !== this.altitude(slab + 1)) {
      const part = (this.parts[slab] ??= { from, to: from, ...emptyAirState() })
      if (part.from !== from || part.to !== to) {
        meanAir(this.air, from, to, part)
        part.from = from
        part.to = to
      }
      copyAir(part, out)
      return
    }
    const { means } = this
    const at = slab * 4
    out.pressure = means[at]
    out.temperature = means[at + 1]
    out.density = means[at + 2]
    out.viscosity = means[at + 3]
    out.windEast = this.windEast[slab]
    out.windNorth = this.windNorth[slab]
  }
}

function copyAir(from: AirState, to: AirState): void {
  to.pressure = from.pressure
  to.temperature = from.temperature
  to.density = from.density
  to.viscosity = from.viscosity
  to.windEast = from.windEast
  to.windNorth = from.windNorth
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
