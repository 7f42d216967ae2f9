import { emptyAirState } from '../physics/air.ts'
import { type Column } from '../physics/column.ts'
import { fill } from '../physics/fill.ts'
import { fly, type Flight, type FlightPlan } from '../physics/flight.ts'
import { sphereVolume } from '../physics/gas.ts'
import { NotFlyable, type NotFlyableReason } from '../physics/notFlyable.ts'

/** A plan whose neck lift is asked for. */
export type PlanToFill = Omit<FlightPlan, 'neckLift'>

export type TargetKind = 'releaseRate' | 'meanRate' | 'burstAltitude' | 'flightTime'

/** What a fill is to reach: m/s, m above mean sea level, or s from release to landing. */
export interface FillTarget {
  kind: TargetKind
  value: number
}

/** What one neck lift gives, SI. */
export interface TradeOffRow {
  neckLift: number
  releaseRate: number
  meanRate: number
  burstAltitude: number
  flightTime: number
  volume: number
  gasMass: number
}

/** Why no neck lift lies beyond an end of the flyable span. */
export interface SpanEnd {
  row: TradeOffRow
  /** What stops a flight with a little less, or a little more, neck lift */
  limit: NotFlyableReason
}

/** No neck lift meets the target. */
export class UnreachableTarget extends Error {
  readonly target: FillTarget
  /** The rows that reach least and most of what the target asks for, each with what limits it. */
  readonly least: SpanEnd
  readonly most: SpanEnd

  constructor(target: FillTarget, least: SpanEnd, most: SpanEnd) {
    super(`no neck lift gives ${target.kind} ${target.value}`)
    this.name = 'UnreachableTarget'
    this.target = target
    this.least = least
    this.most = most
  }
}

/** Neck lifts that the flyable span is searched at. */
const ROWS = 33

/**
 * The neck lifts that fly, evenly by the free lift's cube root (near even in rate of ascent), and what each gives.
 * @throws NotFlyable where none flies
 */
export function tradeOff(plan: PlanToFill, column: Column): TradeOffRow[] {
  const { lowest, highest } = flyableSpan(plan, column)
  const low = Math.cbrt(lowest.row.neckLift - plan.payloadMass)
  const high = Math.cbrt(highest.row.neckLift - plan.payloadMass)
  return Array.from({ length: ROWS }, (_, i) => {
    if (i === 0) return lowest.row
    if (i === ROWS - 1) return highest.row
    return row(plan, column, plan.payloadMass + (low + ((high - low) * i) / (ROWS - 1)) ** 3)
  }).filter((tried): tried is TradeOffRow => !('kind' in tried))
}

/**
 * The least neck lift, kg, that meets the target to a tenth of a gram, with the trade-off rows.
 * @throws UnreachableTarget, or NotFlyable where no neck lift flies
 */
export function fillForTarget(
  plan: PlanToFill,
  target: FillTarget,
  column: Column,
): { neckLift: number; rows: TradeOffRow[] } {
  const { kind, value } = target
  const rows = tradeOff(plan, column)
  const after = rows.findIndex(
    (r, i) => i > 0 && (r[kind] - value) * (rows[i - 1][kind] - value) <= 0,
  )
  if (after < 0) throw unreachable(plan, target, column)

  let low = rows[after - 1].neckLift
  let high = rows[after].neckLift
  const lowSide = Math.sign(rows[after - 1][kind] - value)
  if (lowSide === 0) return { neckLift: low, rows }
  while (high - low > 1e-6) {
    const middle = (low + high) / 2
    const tried = row(plan, column, middle)
    if (!('kind' in tried) && Math.sign(tried[kind] - value) === lowSide) low = middle
    else high = middle
  }
  return { neckLift: high, rows }
}

function unreachable(plan: PlanToFill, target: FillTarget, column: Column): UnreachableTarget {
  const { lowest, highest } = flyableSpan(plan, column)
  const rising = lowest.row[target.kind] <= highest.row[target.kind]
  return rising
    ? new UnreachableTarget(target, lowest, highest)
    : new UnreachableTarget(target, highest, lowest)
}

/** The least and the greatest neck lift that fly. */
function flyableSpan(plan: PlanToFill, column: Column): { lowest: SpanEnd; highest: SpanEnd } {
  const floor = plan.payloadMass
  const ceiling = fullNeckLift(plan, column)
  if (!(ceiling > floor)) row(plan, column, floor * 1.01, true)

  // A free lift of a gram to a full balloon, evenly by ratio: what flies is one span within it.
  const steps = 48
  const tries = Array.from({ length: steps + 1 }, (_, i) => {
    const neckLift = floor + 1e-3 * ((ceiling - floor) / 1e-3) ** (i / steps)
    return { neckLift, result: row(plan, column, neckLift) }
  })
  const first = tries.findIndex(({ result }) => !('kind' in result))
  const last = tries.findLastIndex(({ result }) => !('kind' in result))
  if (first < 0) {
    // Say what stops the fill in the middle: neither too slack to rise nor too full to grow.
    row(plan, column, tries[steps >> 1].neckLift, true)
  }
  return {
    lowest: edge(
      plan,
      column,
      tries[first].neckLift,
      first > 0 ? tries[first - 1].neckLift : floor,
    ),
    highest: edge(
      plan,
      column,
      tries[last].neckLift,
      last < steps ? tries[last + 1].neckLift : ceiling * 1.001,
    ),
  }
}

/** The end of the flyable span between a neck lift that flies and one that does not, to 0.01 g. */
function edge(plan: PlanToFill, column: Column, flies: number, fails: number): SpanEnd {
  let good = flies
  let bad = fails
  while (Math.abs(bad - good) > 1e-5) {
    const middle = (good + bad) / 2
    if ('kind' in row(plan, column, middle)) bad = middle
    else good = middle
  }
  const end = row(plan, column, good)
  const limit = row(plan, column, bad)
  if ('kind' in end || !('kind' in limit)) throw new Error('the flyable span has no edge here')
  return { row: end, limit }
}

/** The neck lift that would fill the balloon to its burst diameter at the site, kg. */
function fullNeckLift(plan: PlanToFill, column: Column): number {
  const air = emptyAirState()
  column.air.sampleAltitude(plan.launch.altitude, air)
  const perKilogram = fill(1, 0, 0, plan.gas, air).volume
  return sphereVolume(plan.balloon.ratedBurstDiameter) / perKilogram - plan.balloon.mass
}

/** What one neck lift gives, or why it does not fly. */
function row(
  plan: PlanToFill,
  column: Column,
  neckLift: number,
  mustFly = false,
): TradeOffRow | NotFlyableReason {
  try {
    return rowOf(fly({ ...plan, neckLift }, column))
  } catch (error) {
    if (mustFly || !(error instanceof NotFlyable)) throw error
    return error.reason
  }
}

function rowOf({ fill: filled, ascent, burst, landing }: Flight): TradeOffRow {
  return {
    neckLift: filled.neckLift,
    releaseRate: ascent.releaseRate,
    meanRate: ascent.meanRate,
    burstAltitude: burst.altitude,
    flightTime: landing.elapsed,
    volume: filled.volume,
    gasMass: filled.gasMass,
  }
}
