import { v7 as uuid } from 'uuid'
import { packTrack, unpackTrack } from '../exchange/trackRow.ts'
import { predict } from '../planning/prediction.ts'
import { type RunRow } from '../store/runs.ts'
import { fieldIdOf, profileIdOf, type Airs } from './airs.ts'
import { toFlightPlan } from './flightPlan.ts'
import { shiftBetween, trialAnswer } from './runAnswer.ts'
import { type Plan } from './schemas/plan.ts'
import { type Run, type Trial } from './schemas/run.ts'
import { seconds } from './units.ts'

/** A flown plan that is to be stored: the answer and its row. */
export interface FlownRun {
  run: Run
  row: RunRow
}

/**
 * Flies a plan without storing anything.
 * @throws NotFlyable, OutsideField, or Problem where its air is not there
 */
export function flyTrial(plan: Plan, airs: Airs, withTrack = false): Trial {
  const source = airs.source(plan.air)
  const prediction = predict(toFlightPlan(plan), source)
  const trial = trialAnswer(prediction, plan, source, now())
  if (!withTrack) return trial
  // Through the packed form, so that a trial shows the same digits as the run stored from it.
  const track = unpackTrack(packTrack(prediction.track), seconds(plan.launch.time))
  return { ...trial, track }
}

/**
 * Flies a plan for storing, compared with the flight's run before where there is one.
 * @throws NotFlyable, OutsideField, or Problem where its air is not there
 */
export function flyRun(flightId: string, plan: Plan, before: Run | null, airs: Airs): FlownRun {
  const source = airs.source(plan.air)
  const prediction = predict(toFlightPlan(plan), source)
  const trial = trialAnswer(prediction, plan, source, now())
  const run: Run = {
    ...trial,
    id: uuid(),
    flightId,
    shift: before && shiftBetween(trial, before),
  }
  const row: RunRow = {
    id: run.id,
    flightId,
    profileId: profileIdOf(plan.air),
    fieldId: fieldIdOf(plan.air),
    answer: JSON.stringify(run),
    track: packTrack(prediction.track),
  }
  return { run, row }
}

/** The present moment as ISO 8601. */
export function now(): string {
  return new Date().toISOString()
}
