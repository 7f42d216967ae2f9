import { emptyAirState } from './air.ts'
import { type Column } from './column.ts'
import { firstAbove } from './firstAbove.ts'

/** How far, m, a path may bend between two of the points below at a pace of one second a metre. */
const BEND = 15

/**
 * The points inside a column's slabs at which a path through them bends, tabulated once for all flights
 * that are recorded in it: the air's breaks, and more where the wind changes fast between two. Between
 * neighbouring points the wind changes steadily.
 */
export class Bends {
  /** Ascending, m */
  readonly altitudes: Float64Array
  /** m/s */
  readonly windEast: Float64Array
  readonly windNorth: Float64Array
  /**
   * How far a path at a steady pace strays from the straight lines between the weightier points where
   * this one is left out, m for each second that it takes over a metre of height.
   */
  readonly stray: Float64Array
  /** The points of slab k are firstOf[k] to firstOf[k + 1]. */
  readonly firstOf: Int32Array

  constructor(column: Column) {
    const points: SlabPoint[] = []
    this.firstOf = new Int32Array(column.count + 1)
    for (let slab = 0; slab < column.count; slab++) {
      this.firstOf[slab] = points.length
      const all = slabPoints(column, slab)
      weigh(all)
      points.push(...all.slice(1, -1))
    }
    this.firstOf[column.count] = points.length
    const series = (value: (point: SlabPoint) => number) => Float64Array.from(points, value)
    this.altitudes = series((point) => point.altitude)
    this.windEast = series((point) => point.windEast)
    this.windNorth = series((point) => point.windNorth)
    this.stray = series((point) => point.stray)
  }
}

interface SlabPoint {
  altitude: number
  windEast: number
  windNorth: number
  /** Drift since the bottom of the slab at a pace of one second a metre, m */
  east: number
  north: number
  stray: number
}

/** The points of a slab, its edges among them. */
function slabPoints(column: Column, slab: number): SlabPoint[] {
  const { breakAltitudes } = column.air
  const top = column.altitude(slab + 1)
  let last = pointAt(column, column.altitude(slab))
  const points = [last]
  for (let next = firstAbove(breakAltitudes, last.altitude); last.altitude < top; next++) {
    const end = pointAt(column, Math.min(breakAltitudes[next] ?? top, top))
    const change = Math.hypot(end.windEast - last.windEast, end.windNorth - last.windNorth)
    // A velocity that changes steadily by Δ over a time t bends a path from its chord by Δ·t/8.
    const bend = (change * (end.altitude - last.altitude)) / 8
    const parts = Math.max(1, Math.ceil(Math.sqrt(bend / BEND)))
    const start = last
    for (let part = 1; part <= parts; part++) {
      const mix = (from: number, to: number) => from + (to - from) * (part / parts)
      const altitude = mix(start.altitude, end.altitude)
      const windEast = mix(start.windEast, end.windEast)
      const windNorth = mix(start.windNorth, end.windNorth)
      const wait = altitude - last.altitude
      last = {
        altitude,
        windEast,
        windNorth,
        east: last.east + ((last.windEast + windEast) / 2) * wait,
        north: last.north + ((last.windNorth + windNorth) / 2) * wait,
        stray: 0,
      }
      points.push(last)
    }
  }
  return points
}

const air = emptyAirState()

function pointAt(column: Column, altitude: number): SlabPoint {
  column.at(altitude, air)
  const { windEast, windNorth } = air
  return { altitude, windEast, windNorth, east: 0, north: 0, stray: 0 }
}

/**
 * Weighs the points between the first and the last as Douglas and Peucker would take them in
 * (Cartographica 10, 1973, p. 112): a point that is taken in later never weighs more.
 */
function weigh(points: SlabPoint[]): void {
  const open: [number, number, number][] = [[0, points.length - 1, Infinity]]
  for (let span = open.pop(); span; span = open.pop()) {
    const [first, last, limit] = span
    if (last - first < 2) continue
    const [a, b] = [points[first], points[last]]
    let farthest = first + 1
    let distance = -1
    for (let index = first + 1; index < last; index++) {
      const point = points[index]
      const share = (point.altitude - a.altitude) / (b.altitude - a.altitude)
      const east = point.east - a.east - share * (b.east - a.east)
      const north = point.north - a.north - share * (b.north - a.north)
      const off = Math.hypot(east, north)
      if (off > distance) {
        distance = off
        farthest = index
      }
    }
    const stray = Math.min(limit, distance)
    points[farthest].stray = stray
    open.push([first, farthest, stray], [farthest, last, stray])
  }
}
