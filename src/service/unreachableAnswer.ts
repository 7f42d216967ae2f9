import { type NotFlyableReason } from '../physics/notFlyable.ts'
import { type SpanEnd, type TargetKind, type UnreachableTarget } from '../planning/fillForTarget.ts'
import { describeNotFlyable } from './notFlyableAnswer.ts'
import { type Fault } from './problems.ts'

/** Each target in the names and units of the API. */
export const TARGETS: Record<TargetKind, { member: string; unit: string; decimals: number }> = {
  releaseRate: { member: 'releaseRateMs', unit: 'm/s', decimals: 2 },
  meanRate: { member: 'meanRateMs', unit: 'm/s', decimals: 2 },
  burstAltitude: { member: 'burstAltitudeM', unit: 'm', decimals: 0 },
  flightTime: { member: 'flightTimeS', unit: 's', decimals: 0 },
}

/** Says what a fill can reach instead, and what stops it at either end. */
export function describeUnreachable({ target, least, most }: UnreachableTarget): Fault {
  const { member, unit, decimals } = TARGETS[target.kind]
  const reached = (end: SpanEnd) => `${end.row[target.kind].toFixed(decimals)} ${unit}`
  const grams = (end: SpanEnd) => `${Math.round(end.row.neckLift * 1000)} g`
  return {
    path: `/target/${member}`,
    message: `No neck lift gives ${target.value} ${unit}. From ${reached(least)} (neck lift ${grams(least)}) to ${reached(most)} (neck lift ${grams(most)}) can be reached: beyond the first ${why(least.limit)}; beyond the second ${why(most.limit)}.`,
  }
}

function why(reason: NotFlyableReason): string {
  switch (reason.kind) {
    case 'no-free-lift':
      return 'the balloon would not rise'
    case 'full-at-fill':
      return 'the balloon would burst at the fill'
    case 'no-burst':
      return `the balloon would not burst below ${reason.ceiling} m`
    case 'stops-rising':
      return `the balloon would stop rising at ${Math.round(reason.altitude)} m`
    case 'falls-past-landing':
      return 'the balloon would burst below the landing altitude'
    default:
      return describeNotFlyable(reason).message
  }
}
