import { type ProfileAnswer } from '../../service/schemas/profile.ts'
import { reading } from '../readings.ts'

/** A time as "2026-12-05 09:00 UTC". */
export function utc(time: string): string {
  return `${time.slice(0, 10)} ${time.slice(11, 16)} UTC`
}

/** What a sounding holds of a quantity, as "41 levels from 345 m to 31 200 m". */
export function span(summary: ProfileAnswer['wind']): string {
  const { levels, lowestAltitudeM, highestAltitudeM } = summary
  if (lowestAltitudeM === null || highestAltitudeM === null) return 'none'
  const count = levels === 1 ? '1 level' : `${levels} levels`
  return levels === 1
    ? `${count} at ${reading('height', lowestAltitudeM)}`
    : `${count} from ${reading('height', lowestAltitudeM)} to ${reading('height', highestAltitudeM)}`
}

/** When a sounding is valid, in words. */
export function validity({ validAt }: ProfileAnswer): string {
  return validAt === null ? 'time not told' : utc(validAt)
}
