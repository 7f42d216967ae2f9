import { type AirSource } from '../planning/airSource.ts'
import { geodesicLine } from '../planning/geodesic.ts'
import { place } from './runAnswer.ts'
import { type Plan } from './schemas/plan.ts'
import { seconds } from './units.ts'

/** What a watch asks of air. m and s. */
export interface Nearness {
  within: number
  withinTime: number
}

/**
 * Air this far away counts as much as air a second older: it is carried along by the wind, here of
 * 15 m/s (Taylor's hypothesis; the speed is an assumption).
 */
const CARRIED = 15

/** How far the air is from a release: m and s; infinite where it is not known. */
function gaps(source: AirSource, { launch }: Plan): { distance: number; time: number } {
  const { position, validAt } = source
  return {
    distance: position ? geodesicLine(place(launch), position).distance : Infinity,
    time: validAt === null ? Infinity : Math.abs(validAt - seconds(launch.time)),
  }
}

/** Whether a sounding is near enough to a release in place and time to speak of its air. */
export function covers(source: AirSource, plan: Plan, near: Nearness): boolean {
  const { distance, time } = gaps(source, plan)
  return distance <= near.within && time <= near.withinTime
}

/** How little the air has to do with a release, s: its age there, its distance turned to age. */
export function remoteness(source: AirSource, plan: Plan): number {
  const { distance, time } = gaps(source, plan)
  return time + distance / CARRIED
}

/** Whether air is better for a flight than the air it flew in: nearer, or a later issue of the same. */
export function betterAir(source: AirSource, flown: AirSource, plan: Plan): boolean {
  const nearer = remoteness(flown, plan) - remoteness(source, plan)
  if (Math.abs(nearer) > 1e-6) return nearer > 0 // NaN, both infinite, is not
  return source.id !== null && flown.id !== null && source.id > flown.id
}
