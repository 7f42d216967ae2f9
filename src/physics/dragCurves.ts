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
  /** Fills `reynolds` [first, end) with that of each of `best`: a loop of the curve's own runs much faster. */
  reynoldsOfAll(best: Float64Array, reynolds: Float64Array, first: number, end: number): void
  /** Reynolds numbers that the curve was fitted to. */
  readonly fitted: { from: number; to: number }
  /** The Best number at which `reynolds` jumps; null for a curve without a drag crisis. */
  readonly jump: number | null
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
  readonly jump = null
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

  reynoldsOfAll(best: Float64Array, reynolds: Float64Array, first: number, end: number): void {
    for (let i = first; i < end; i++) reynolds[i] = this.reynolds(best[i])
  }
}

/**
 * Drag of ascending sounding balloons, from radiosonde ascents: a quadratic in x = ln Re, with Re held
 * to the fitted range. Gallice, Wienhold, Hoyle, Immler and Peter, Atmos. Meas. Tech. 4, 2011, p. 2235;
 * coefficients from memory.
 */
class SoundingBalloonDrag implements DragCurve {
  readonly fitted = { from: 4e4, to: 1.5e6 }
  readonly jump = null
  private readonly low = Math.log(this.fitted.from)
  private readonly high = Math.log(this.fitted.to)
  private readonly lowRoot = Math.exp(logBest(this.low) / 2)
  private readonly highRoot = Math.exp(logBest(this.high) / 2)
  /** Re, and its slope times the step, at equal steps of √(Cd·Re²) between the two ends. */
  private readonly step = (this.highRoot - this.lowRoot) / INVERSE_STEPS
  private readonly inverse = new Float64Array(INVERSE_STEPS + 1)
  private readonly inverseRise = new Float64Array(INVERSE_STEPS + 1)

  constructor() {
    let x = this.low
    for (let node = 0; node <= INVERSE_STEPS; node++) {
      const root = this.lowRoot + node * this.step
      // Newton: ln(Cd·Re²) rises by 1.5 to 2 per unit of ln Re over the whole range.
      for (let round = 0; round < 20; round++)
        x -= (logBest(x) - 2 * Math.log(root)) / logBestSlope(x)
      this.inverse[node] = Math.exp(x)
      this.inverseRise[node] = (this.step * 2 * Math.exp(x)) / (root * logBestSlope(x))
    }
  }

  coefficient(reynolds: number): number {
    return quadratic(Math.min(this.high, Math.max(this.low, Math.log(reynolds))))
  }

  reynolds(best: number): number {
    const root = Math.sqrt(best)
    if (root <= this.lowRoot) return root / Math.sqrt(quadratic(this.low))
    if (root >= this.highRoot) return root / Math.sqrt(quadratic(this.high))
    const place = (root - this.lowRoot) / this.step
    const node = Math.min(INVERSE_STEPS - 1, Math.floor(place))
    const s = place - node
    const r = 1 - s
    // Cubic Hermite interpolation: within 1e-9 of ln Re (tests/physics/dragCurves.test.ts).
    return (
      r * r * ((1 + 2 * s) * this.inverse[node] + s * this.inverseRise[node]) +
      s * s * ((1 + 2 * r) * this.inverse[node + 1] - r * this.inverseRise[node + 1])
    )
  }

  reynoldsOfAll(best: Float64Array, reynolds: Float64Array, first: number, end: number): void {
    for (let i = first; i < end; i++) reynolds[i] = this.reynolds(best[i])
  }
}

/** Cells of the table that takes √(Cd·Re²) back to Re. */
const INVERSE_STEPS = 1024

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
  readonly jump: number
  /** ln Re where Cd·Re² stops rising as the crisis begins, and where it is regained after it. */
  private readonly crisis: number
  private readonly regained: number
  private table: InverseTable | undefined

  constructor() {
    const from = Math.log(1e5) // Cd·Re² rises up to here, falls soon after, and rises from Re = 1e6 on
    let peak = from
    while (this.logBest(peak + 1e-3) > this.logBest(peak)) peak += 1e-3
    this.crisis = highest((x) => this.logBest(x), peak - 1e-3, peak + 1e-3)
    const logJump = this.logBest(this.crisis)
    this.jump = Math.exp(logJump)
    let valley = this.crisis + 1e-3
    while (this.logBest(valley + 1e-3) < this.logBest(valley)) valley += 1e-3
    this.regained = this.bisect(logJump, valley, Math.log(1e7))
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
    const place = (target - INVERSE_FROM) / INVERSE_STEP
    const cell = Math.floor(place)
    if (!(cell >= 0 && cell < INVERSE_CELLS)) return Math.exp(this.search(target))
    const table = (this.table ??= new InverseTable((value) => this.search(value)))
    return Math.exp(
      table.smooth[cell] ? table.interpolate(cell, place - cell) : this.search(target),
    )
  }

  reynoldsOfAll(best: Float64Array, reynolds: Float64Array, first: number, end: number): void {
    for (let i = first; i < end; i++) reynolds[i] = this.reynolds(best[i])
  }

  /** The lowest ln Re with ln(Cd·Re²) = `target`. */
  private search(target: number): number {
    return target > Math.log(this.jump)
      ? this.bisect(target, this.regained, SEARCH_TO)
      : this.bisect(target, SEARCH_FROM, this.crisis)
  }

  /** ln Re in [left, right], in which Cd·Re² rises, where its logarithm is `target`. */
  private bisect(target: number, left: number, right: number): number {
    while (right - left > 1e-10) {
      const middle = (left + right) / 2
      if (this.logBest(middle) < target) left = middle
      else right = middle
    }
    return (left + right) / 2
  }

  private logBest(x: number): number {
    return 2 * x + Math.log(this.coefficient(Math.exp(x)))
  }
}

/** Where ln Re is looked for. */
const SEARCH_FROM = -12
const SEARCH_TO = 28

/** Where in [left, right] a function of one peak is highest, to 1e-9: ternary search. */
function highest(value: (x: number) => number, left: number, right: number): number {
  while (right - left > 1e-9) {
    const third = (right - left) / 3
    if (value(left + third) < value(right - third)) left += third
    else right -= third
  }
  return (left + right) / 2
}

/** Where the table of ln Re begins in ln(Cd·Re²), its steps and its cells: Re from 1e3 to 1e8. */
const INVERSE_FROM = 13
const INVERSE_STEP = 0.01
const INVERSE_CELLS = 2300

/** ln Re at equal steps of ln(Cd·Re²): cubic through four neighbours, but for cells near a jump. */
class InverseTable {
  /** 1 where the cubic meets what the search finds, to 1e-8. */
  readonly smooth = new Uint8Array(INVERSE_CELLS)
  /** From one step before the first cell to one after the last. */
  private readonly values: Float64Array

  constructor(search: (target: number) => number) {
    this.values = Float64Array.from({ length: INVERSE_CELLS + 3 }, (_, i) =>
      search(INVERSE_FROM + (i - 1) * INVERSE_STEP),
    )
    for (let cell = 0; cell < INVERSE_CELLS; cell++) {
      const found = search(INVERSE_FROM + (cell + 0.5) * INVERSE_STEP)
      this.smooth[cell] = Math.abs(this.interpolate(cell, 0.5) - found) < 1e-8 ? 1 : 0
    }
  }

  /** Lagrange's cubic in the cell, `s` from 0 to 1 (Abramowitz and Stegun, eq. 25.2.13). */
  interpolate(cell: number, s: number): number {
    const { values } = this
    return (
      (-s * (s - 1) * (s - 2) * values[cell]) / 6 +
      ((s * s - 1) * (s - 2) * values[cell + 1]) / 2 -
      (s * (s + 1) * (s - 2) * values[cell + 2]) / 2 +
      (s * (s * s - 1) * values[cell + 3]) / 6
    )
  }
}

const soundingBalloonDrag = new SoundingBalloonDrag()
const smoothSphereDrag = new SmoothSphereDrag()
