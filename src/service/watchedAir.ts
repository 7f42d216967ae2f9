import { type AirSource, type ColumnSource } from '../planning/airSource.ts'
import { geodesicLine } from '../planning/geodesic.ts'
import { place } from './runAnswer.ts'
import { type Plan } from './schemas/plan.ts'
import { type Run } from './schemas/run.ts'
import { seconds } from './units.ts'

/** What a watch asks of air. m and s. */
export interface Nearness {
  within: number
  withinTime: number
}

/** How little some air has to do with a release, s, and its id, by which a later issue is known. */
export interface Remoteness {
  id: string | null
  age: number
}

/**
 * Air this far away counts as much as air a second older: it is carried along by the wind, here of
 * 15 m/s (Taylor's hypothesis; the speed is an assumption).
 */
const CARRIED = 15

/** A forecast ages so much more slowly than an observation that stays as it is. An assumption. */
const FORECAST_AGEING = 1 / 4

/** How far the air is from a release: m and s; infinite where it is not known. */
function gaps(source: ColumnSource, { launch }: Plan): { distance: number; time: number } {
  const { position, validAt } = source
  return {
    distance: position ? geodesicLine(place(launch), position).distance : Infinity,
    time: validAt === null ? Infinity : Math.abs(validAt - seconds(launch.time)),
  }
}

/**
 * Whether a sounding is near enough to a release in place and time to speak of its air. Of a forecast that
 * shows only when the flight is flown: it is refused beyond the grid or the times.
 */
export function covers(source: AirSource, plan: Plan, near: Nearness): boolean {
  if (source.kind === 'field') return true
  const { distance, time } = gaps(source, plan)
  return distance <= near.within && time <= near.withinTime
}

/** How little air has to do with a release: its age there, with its distance turned to age. */
export function remoteness(source: AirSource, plan: Plan): Remoteness {
  if (source.kind === 'field') return forecastRemoteness(source.id, source.referenceTime, plan)
  const { distance, time } = gaps(source, plan)
  return { id: source.id, age: time + distance / CARRIED }
}

/** How little the air of a forecast's run that was flown in has to do with a release, though it be gone. */
export function flownForecast({ air }: Run, plan: Plan): Remoteness {
  const referenceTime = air.referenceTime === undefined ? -Infinity : seconds(air.referenceTime)
  return forecastRemoteness(air.id ?? null, referenceTime, plan)
}

function forecastRemoteness(id: string | null, referenceTime: number, { launch }: Plan) {
  return { id, age: FORECAST_AGEING * Math.abs(seconds(launch.time) - referenceTime) }
}

/** Whether air is better for a flight than other air: less remote, or a later issue of the same. */
export function isBetter(one: Remoteness, other: Remoteness): boolean {
  const nearer = other.age - one.age
  if (Math.abs(nearer) > 1e-6) return nearer > 0 // NaN, both infinite, is not
  return one.id !== null && other.id !== null && one.id > other.id
}
