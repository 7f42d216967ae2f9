/** Why a plan cannot be flown: the number that is wrong and, where there is one, the number that works. SI. */
export type NotFlyableReason =
  | { kind: 'no-free-lift'; neckLift: number; payloadMass: number }
  | { kind: 'full-at-fill'; ratedBurstDiameter: number; fillDiameter: number }
  | {
      kind: 'no-burst'
      ratedBurstDiameter: number
      ceiling: number
      /** Diameter the balloon has grown to at the ceiling: a smaller rated diameter bursts below it. */
      ceilingDiameter: number
    }
  | {
      kind: 'stops-rising'
      neckLift: number
      /** Where it floats, m */
      altitude: number
      /** The least neck lift, kg, that keeps it rising to the ceiling; null where none would */
      neededNeckLift: number | null
    }
  | { kind: 'falls-past-landing'; landingAltitude: number; burstAltitude: number }

/** A plan that is well formed and still cannot fly. */
export class NotFlyable extends Error {
  readonly reason: NotFlyableReason

  constructor(reason: NotFlyableReason) {
    super(`not flyable: ${reason.kind}`)
    this.name = 'NotFlyable'
    this.reason = reason
  }
}
