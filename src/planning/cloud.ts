/** An ellipse about the mean of a cloud that holds a share of it. m and radians. */
export interface CloudEllipse {
  share: number
  semiMajor: number
  semiMinor: number
  /** Of the major axis, clockwise from north, in [0, π) */
  majorBearing: number
}

/** A cloud thinner than this, m, counts as this thick: one input alone strews along a line. */
const THIN = 0.1

/** Points in a plane, their mean and covariance. East and north in m, two numbers for each point. */
export class Cloud {
  readonly points: Float64Array
  readonly count: number
  readonly meanEast: number
  readonly meanNorth: number
  readonly varianceEast: number
  readonly varianceNorth: number
  readonly covariance: number
  /** Standard deviations along the principal axes, m, the longer first. */
  readonly major: number
  readonly minor: number
  /** Unit vector of the major axis. */
  readonly axisEast: number
  readonly axisNorth: number

  constructor(points: Float64Array) {
    const count = points.length / 2
    let [east, north, ee, nn, en] = [0, 0, 0, 0, 0]
    for (let i = 0; i < count; i++) {
      east += points[2 * i] / count
      north += points[2 * i + 1] / count
    }
    for (let i = 0; i < count; i++) {
      const e = points[2 * i] - east
      const n = points[2 * i + 1] - north
      ee += e * e
      nn += n * n
      en += e * n
    }
    const free = Math.max(1, count - 1)
    this.points = points
    this.count = count
    this.meanEast = east
    this.meanNorth = north
    this.varianceEast = ee / free
    this.varianceNorth = nn / free
    this.covariance = en / free
    // Eigenvalues of the 2×2 covariance matrix.
    const middle = (this.varianceEast + this.varianceNorth) / 2
    const half = (this.varianceEast - this.varianceNorth) / 2
    const reach = Math.hypot(half, this.covariance)
    this.major = Math.sqrt(middle + reach)
    this.minor = Math.sqrt(Math.max(0, middle - reach))
    const angle = Math.atan2(this.covariance, half) / 2
    this.axisEast = Math.cos(angle)
    this.axisNorth = Math.sin(angle)
  }

  /** A point of the cloud along the principal axes in their standard deviations. */
  whiten(i: number, out: { x: number; y: number }): void {
    const e = this.points[2 * i] - this.meanEast
    const n = this.points[2 * i + 1] - this.meanNorth
    out.x = (e * this.axisEast + n * this.axisNorth) / Math.max(this.major, THIN)
    out.y = (n * this.axisEast - e * this.axisNorth) / Math.max(this.minor, THIN)
  }

  /** East and north, m, of a point given along the principal axes. */
  unwhiten(x: number, y: number): { east: number; north: number } {
    const along = x * Math.max(this.major, THIN)
    const across = y * Math.max(this.minor, THIN)
    return {
      east: this.meanEast + along * this.axisEast - across * this.axisNorth,
      north: this.meanNorth + along * this.axisNorth + across * this.axisEast,
    }
  }

  /** The ellipses of the covariance's shape, each just so large that it holds its share of the points. */
  ellipses(shares: readonly number[]): CloudEllipse[] {
    const at = { x: 0, y: 0 }
    const distances = new Float64Array(this.count)
    for (let i = 0; i < this.count; i++) {
      this.whiten(i, at)
      distances[i] = Math.hypot(at.x, at.y)
    }
    distances.sort()
    const bearing = Math.atan2(this.axisEast, this.axisNorth)
    return shares.map((share) => {
      const size = quantile(distances, share)
      return {
        share,
        semiMajor: size * this.major,
        semiMinor: size * this.minor,
        majorBearing: (bearing + Math.PI) % Math.PI,
      }
    })
  }
}

/** The value below which a share of ascending values lies (Hyndman and Fan, Am. Stat. 50, 1996, type 7). */
export function quantile(ascending: Float64Array, share: number): number {
  const place = share * (ascending.length - 1)
  const below = Math.floor(place)
  const above = Math.min(ascending.length - 1, below + 1)
  return ascending[below] + (place - below) * (ascending[above] - ascending[below])
}
