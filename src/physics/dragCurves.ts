/**
 * A drag coefficient on the frontal area of the sphere, as a function of the Reynolds number, and the
 * way back that the ascent needs: the Reynolds number at which a given drag is met. Cd·Re² holds no
 * speed, only the force and the fluid: it is the Best number, 8·F·ρ/(π·μ²) for a sphere.
 */
export interface DragCurve {
  /** Drag coefficient at a Reynolds number. */
  coefficient(reynolds: number): number
  /** The lowest Reynolds number with Cd·Re² = `best`: the speed reached first from rest. */
  reynolds(best: number): number
  /** Reynolds numbers that the curve was fitted to. */
  readonly fitted: { from: number; to: number }
}

export type DragChoice =
  | { curve: 'sounding-balloon' }
  | { curve: 'smooth-sphere' }
  | { curve: 'constant'; coefficient: number }

/** The drag curve that a plan asks for. */
export function dragCurve(choice: DragChoice): DragCurve {
  switch (choice.curve) {
    case 'sounding-balloon':
      return soundingBalloonDrag
    case 'smooth-sphere':
      return smoothSphereDrag
    case 'constant':
      return new ConstantDrag(choice.coefficient)
  }
}

class ConstantDrag implements DragCurve {
  readonly fitted = { from: 0, to: Infinity }
  private readonly value: number

  constructor(value: number) {
    this.value = value
  }

  coefficient(): number {
    return this.value
  }

  reynolds(best: number): number {
    return Math.sqrt(best / this.value)
  }
}

/**
 * Drag of ascending sounding balloons, from radiosonde ascents: a quadratic in x = ln Re, with Re held
 * to the fitted range. Gallice, Wienhold, Hoyle, Immler and Peter, Atmos. Meas. Tech. 4, 2011, p. 2235;
 * coefficients from memory.
 */
class SoundingBalloonDrag implements DragCurve {
  readonly fitted = { from: 4e4, to: 1.5e6 }
  private readonly low = Math.log(this.fitted.from)
  private readonly high = Math.log(this.fitted.to)
  private readonly lowBest = logBest(this.low)
  private readonly highBest = logBest(this.high)
  /** ln Re and its slope at equal steps of ln(Cd·Re²) between the two ends. */
  private readonly step = (this.highBest - this.lowBest) / INVERSE_STEPS
  private readonly inverse = new Float64Array(INVERSE_STEPS + 1)
  private readonly inverseSlope = new Float64Array(INVERSE_STEPS + 1)

  constructor() {
    let x = this.low
    for (let node = 0; node <= INVERSE_STEPS; node++) {
      const target = this.lowBest + node * this.step
      // Newton: ln(Cd·Re²) rises by 1.5 to 2 per unit of ln Re over the whole range.
      for (let round = 0; round < 20; round++) x -= (logBest(x) - target) / logBestSlope(x)
      this.inverse[node] = x
      this.inverseSlope[node] = 1 / logBestSlope(x)
    }
  }

  coefficient(reynolds: number): number {
    return quadratic(Math.min(this.high, Math.max(this.low, Math.log(reynolds))))
  }

  reynolds(best: number): number {
    const target = Math.log(best)
    if (target <= this.lowBest) return Math.sqrt(best / quadratic(this.low))
    if (target >= this.highBest) return Math.sqrt(best / quadratic(this.high))
    const place = (target - this.lowBest) / this.step
    const node = Math.min(INVERSE_STEPS - 1, Math.floor(place))
    const s = place - node
    const r = 1 - s
    // Cubic Hermite interpolation: within 1e-9 of ln Re (tests/physics/dragCurves.test.ts).
    const x =
      r * r * ((1 + 2 * s) * this.inverse[node] + s * this.step * this.inverseSlope[node]) +
      s * s * ((1 + 2 * r) * this.inverse[node + 1] - r * this.step * this.inverseSlope[node + 1])
    return Math.exp(x)
  }
}

/** Cells of the table that takes ln(Cd·Re²) back to ln Re. */
const INVERSE_STEPS = 128

/** Constant, linear and square coefficient of Cd in ln Re (from memory, see SoundingBalloonDrag). */
const QUADRATIC = [10.49, -1.406, 0.04808] as const

function quadratic(x: number): number {
  return QUADRATIC[0] + x * (QUADRATIC[1] + x * QUADRATIC[2])
}

function logBest(x: number): number {
  return 2 * x + Math.log(quadratic(x))
}

function logBestSlope(x: number): number {
  return 2 + (QUADRATIC[1] + 2 * x * QUADRATIC[2]) / quadratic(x)
}

/**
 * Drag of a smooth sphere through the drag crisis: Morrison, An Introduction to Fluid Mechanics, 2013,
 * eq. 8.83. In the crisis Cd falls faster than Re² rises, so that one force is met at up to three
 * speeds; a sphere that gathers speed from rest stays at the slowest.
 */
class SmoothSphereDrag implements DragCurve {
  readonly fitted = { from: 0, to: 1e6 }
  /** Grid of ln Re, and the highest ln(Cd·Re²) met up to each: its crossings are the slowest speeds. */
  private readonly grid = Float64Array.from({ length: 1601 }, (_, i) => -12 + i * 0.025)
  private readonly envelope = new Float64Array(this.grid.length)

  constructor() {
    let highest = -Infinity
    this.grid.forEach((x, i) => {
      highest = Math.max(highest, this.logBest(x))
      this.envelope[i] = highest
    })
  }

  coefficient(reynolds: number): number {
    const low = reynolds / 5
    const crisis = reynolds / 2.63e5
    const high = reynolds / 1e6
    return (
      24 / reynolds +
      (2.6 * low) / (1 + Math.pow(low, 1.52)) +
      (0.411 * Math.pow(crisis, -7.94)) / (1 + Math.pow(crisis, -8)) +
      (0.25 * high) / (1 + high)
    ) // Morrison 2013, eq. 8.83
  }

  reynolds(best: number): number {
    const target = Math.log(best)
    let low = 0
    let high = this.grid.length - 1
    while (high - low > 1) {
      const middle = (low + high) >> 1
      if (this.envelope[middle] < target) low = middle
      else high = middle
    }
    let left = this.grid[low]
    let right = this.grid[high]
    while (right - left > 1e-10) {
      const middle = (left + right) / 2
      if (this.logBest(middle) < target) left = middle
      else right = middle
    }
    return Math.exp((left + right) / 2)
  }

  private logBest(x: number): number {
    return 2 * x + Math.log(this.coefficient(Math.exp(x)))
  }
}

const soundingBalloonDrag = new SoundingBalloonDrag()
const smoothSphereDrag = new SmoothSphereDrag()
