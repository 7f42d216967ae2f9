import { contours } from 'd3-contour'
import { quantile, type Cloud } from './cloud.ts'

/** The smallest area that holds a share of a cloud. */
export interface DensestRegion {
  share: number
  /** m² */
  area: number
  /** Polygons of rings of [east, north], m: the outer ring counter-clockwise, then its holes clockwise */
  polygons: [number, number][][][]
}

/** Cells to a kernel's width, and most cells along an axis. */
const CELLS_PER_WIDTH = 3
const MOST_CELLS = 240

/** The kernel reaches this many widths. */
const KERNEL_REACH = 4

/**
 * The smallest areas that hold given shares of a cloud: the superlevel sets of its density, which a
 * Gaussian kernel estimates along the principal axes. The density's level is the one that the share of
 * points exceeds without their own kernel, so that fresh points fall inside as often.
 * (Hyndman, Am. Stat. 50, 1996, p. 120, on highest-density regions and on the quantile for their level.)
 */
export function densestRegions(cloud: Cloud, shares: readonly number[]): DensestRegion[] {
  const { count } = cloud
  // Scott's rule in two dimensions, narrowed: the cloud is no single Gaussian (Scott 1992, eq. 6.42).
  const width = 0.7 * count ** (-1 / 6)
  const grid = new DensityGrid(cloud, width)
  const at = { x: 0, y: 0 }
  const densities = new Float64Array(count)
  for (let i = 0; i < count; i++) {
    cloud.whiten(i, at)
    densities[i] = ((grid.density(at.x, at.y) - grid.ownDensity) * count) / (count - 1)
  }
  densities.sort()

  return shares.map((share) => {
    const level = quantile(densities, 1 - share)
    const [shape] = contours().size([grid.columns, grid.rows]).thresholds([level])(
      grid.values as unknown as number[],
    )
    let area = 0
    const polygons = shape.coordinates.map((rings) =>
      rings.map((ring, index) => {
        const placed = ring.map(([column, row]): [number, number] => {
          // The library puts the value of a cell at its middle, half a cell in.
          const { east, north } = cloud.unwhiten(
            grid.left + (column - 0.5) * grid.cell,
            grid.bottom + (row - 0.5) * grid.cell,
          )
          return [east, north]
        })
        const signed = signedArea(placed)
        area += index === 0 ? Math.abs(signed) : -Math.abs(signed)
        return signed > 0 === (index === 0) ? placed : placed.reverse()
      }),
    )
    return { share, area, polygons }
  })
}

/** The density of a cloud on a grid along its principal axes. */
class DensityGrid {
  readonly left: number
  readonly bottom: number
  readonly cell: number
  readonly columns: number
  readonly rows: number
  readonly values: Float64Array
  /** What a point's own kernel adds to the density where it stands. */
  readonly ownDensity: number

  constructor(cloud: Cloud, width: number) {
    const at = { x: 0, y: 0 }
    let [left, right, bottom, top] = [0, 0, 0, 0]
    for (let i = 0; i < cloud.count; i++) {
      cloud.whiten(i, at)
      left = Math.min(left, at.x)
      right = Math.max(right, at.x)
      bottom = Math.min(bottom, at.y)
      top = Math.max(top, at.y)
    }
    const margin = KERNEL_REACH * width
    this.left = left - margin
    this.bottom = bottom - margin
    const span = Math.max(right - left, top - bottom) + 2 * margin
    this.cell = Math.max(width / CELLS_PER_WIDTH, span / (MOST_CELLS - 2))
    this.columns = Math.ceil((right + margin - this.left) / this.cell) + 1
    this.rows = Math.ceil((top + margin - this.bottom) / this.cell) + 1
    const counts = new Float64Array(this.columns * this.rows)
    this.values = counts
    for (let i = 0; i < cloud.count; i++) {
      cloud.whiten(i, at)
      this.deposit(at.x, at.y, 1 / cloud.count)
    }
    const kernel = gaussianKernel(width / this.cell)
    this.values = smooth(smooth(counts, this.columns, 1, kernel), this.rows, this.columns, kernel)
    // Dealing to four cells and reading from four again blurs by a third of a cell squared on average.
    const variance = (width / this.cell) ** 2 + 1 / 3
    this.ownDensity = 1 / (cloud.count * 2 * Math.PI * variance)
  }

  /** Density at a place, per cell, linear between the cells' middles. */
  density(x: number, y: number): number {
    const { values, columns } = this
    const column = (x - this.left) / this.cell
    const row = (y - this.bottom) / this.cell
    const i = Math.floor(column)
    const j = Math.floor(row)
    const across = column - i
    const up = row - j
    const at = j * columns + i
    return (
      (1 - up) * ((1 - across) * values[at] + across * values[at + 1]) +
      up * ((1 - across) * values[at + columns] + across * values[at + columns + 1])
    )
  }

  private deposit(x: number, y: number, weight: number): void {
    const { values, columns } = this
    const column = (x - this.left) / this.cell
    const row = (y - this.bottom) / this.cell
    const i = Math.floor(column)
    const j = Math.floor(row)
    const across = column - i
    const up = row - j
    const at = j * columns + i
    values[at] += weight * (1 - up) * (1 - across)
    values[at + 1] += weight * (1 - up) * across
    values[at + columns] += weight * up * (1 - across)
    values[at + columns + 1] += weight * up * across
  }
}

/** Half of a Gaussian kernel of a standard deviation in cells, from its middle outwards; it sums to 1. */
function gaussianKernel(deviation: number): Float64Array {
  const reach = Math.ceil(KERNEL_REACH * deviation)
  const half = Float64Array.from({ length: reach + 1 }, (_, i) =>
    Math.exp(-((i / deviation) ** 2) / 2),
  )
  const total = 2 * half.reduce((sum, value) => sum + value, 0) - half[0]
  return half.map((value) => value / total)
}

/** Smooths the lines of a grid: `length` cells that stand `stride` apart in each line. */
function smooth(
  values: Float64Array,
  length: number,
  stride: number,
  kernel: Float64Array,
): Float64Array {
  const out = new Float64Array(values.length)
  for (let at = 0; at < values.length; at++) {
    const value = values[at]
    if (value === 0) continue
    const place = Math.floor(at / stride) % length
    out[at] += value * kernel[0]
    for (let step = 1; step < kernel.length; step++) {
      if (place >= step) out[at - step * stride] += value * kernel[step]
      if (place + step < length) out[at + step * stride] += value * kernel[step]
    }
  }
  return out
}

/** Area of a ring, m², positive counter-clockwise. */
function signedArea(ring: readonly [number, number][]): number {
  let twice = 0
  for (let i = 1; i < ring.length; i++) {
    twice += ring[i - 1][0] * ring[i][1] - ring[i][0] * ring[i - 1][1]
  }
  return twice / 2
}
