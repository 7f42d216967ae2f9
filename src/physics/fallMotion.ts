/** What comes down after the burst, SI. */
export interface FallingLoad {
  /** Payload and the share of the balloon left on the line, kg */
  mass: number
  /** Cd·A of the parachute, m² */
  dragArea: number
}

/** The motion of a falling load, step by step, through air of known density. */
export class FallMotion {
  /** w², m²/s² */
  protected square = 0
  peakSquare = 0
  /** Cd·A/m: the drag k over the density, m²/kg */
  protected dragPerDensity = 0
  /** What the first and the last stage of the step taken last add to its duration, s. */
  firstDuration = 0
  lastDuration = 0

  /** At rest. */
  begin(load: FallingLoad): void {
    this.square = 0
    this.peakSquare = 0
    this.dragPerDensity = load.dragArea / load.mass
  }

  /** m/s, downwards positive */
  get speed(): number {
    return Math.sqrt(this.square)
  }

  /**
   * Two-stage Radau IIA (Hairer and Wanner, Solving Ordinary Differential Equations II, table IV.5.5) on
   * dq/dx = s·(2g − k·q) over a step `h` in x, with s = ds/dx. The equation is linear, so its two stages
   * are a pair of linear equations. Returns the duration ∫ s/√q dx, seconds.
   */
  radau(
    h: number,
    firstScale: number,
    firstGravity: number,
    firstDensity: number,
    lastScale: number,
    lastGravity: number,
    lastDensity: number,
  ): number {
    const { dragPerDensity } = this
    const firstPull = h * firstScale * 2 * firstGravity
    const lastPull = h * lastScale * 2 * lastGravity
    const firstDrag = h * firstScale * firstDensity * dragPerDensity
    const lastDrag = h * lastScale * lastDensity * dragPerDensity
    // q₁ = q₀ + 5/12·f₁ − 1/12·f₂ and q₂ = q₀ + 3/4·f₁ + 1/4·f₂ with f = pull − drag·q
    const right1 = this.square + (5 * firstPull - lastPull) / 12
    const right2 = this.square + (3 * firstPull + lastPull) / 4
    const a11 = 1 + (5 / 12) * firstDrag
    const a12 = -lastDrag / 12
    const a21 = (3 / 4) * firstDrag
    const a22 = 1 + lastDrag / 4
    const determinant = a11 * a22 - a12 * a21
    const first = (right1 * a22 - a12 * right2) / determinant
    const last = (a11 * right2 - a21 * right1) / determinant
    this.square = last
    if (first > this.peakSquare) this.peakSquare = first
    if (last > this.peakSquare) this.peakSquare = last
    this.firstDuration = (h * 0.75 * firstScale) / Math.sqrt(first)
    this.lastDuration = (h * 0.25 * lastScale) / Math.sqrt(last)
    return this.firstDuration + this.lastDuration
  }
}
