/** Whether air beyond a field's grid or times is refused, or the nearest air is taken. */
export type OutsidePolicy = 'refuse' | 'hold'

/** What a field covers. Angles in radians, times in s since 1970 UTC. */
export interface FieldCoverage {
  grid: string
  /** The corners, in the order first row's first and last point, last row's first and last point */
  corners: readonly { latitude: number; longitude: number }[]
  firstTime: number
  lastTime: number
}

/** Air was asked for where a field has none. Angles in radians, time in s since 1970 UTC. */
export class OutsideField extends Error {
  /** Beyond the grid, before or after its times, or at a point whose values are missing */
  readonly beyond: 'grid' | 'times' | 'values'
  readonly at: { latitude: number; longitude: number; time: number }
  readonly coverage: FieldCoverage

  constructor(beyond: OutsideField['beyond'], at: OutsideField['at'], coverage: FieldCoverage) {
    super(`outside the field's ${beyond}`)
    this.name = 'OutsideField'
    this.beyond = beyond
    this.at = at
    this.coverage = coverage
  }
}
