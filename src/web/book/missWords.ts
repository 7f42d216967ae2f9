import { type Miss } from '../../service/schemas/flight.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { reading } from '../readings.ts'

/** Less than half of the smallest thing said, s and m. */
const LEAST_SECONDS = 30
const LEAST_METRES = 50

/** How far what happened was off a run, as one would say it. */
export function missWords(miss: Miss): string {
  const parts = [
    landingWords(miss),
    miss.landingTimeS === null ? null : `landed ${timeWords(miss.landingTimeS)}`,
    miss.burstAltitudeM === null ? null : `burst ${heightWords(miss.burstAltitudeM)}`,
    miss.burstTimeS === null ? null : `burst ${timeWords(miss.burstTimeS)}`,
  ]
  return parts.filter((part) => part !== null).join(', ') || 'nothing to compare it with yet'
}

function landingWords({ landingDistanceM, landingBearingDeg }: Miss): string | null {
  if (landingDistanceM === null) return null
  if (landingDistanceM < LEAST_METRES || landingBearingDeg === null) {
    return 'landed where it was predicted'
  }
  return `landed ${distanceWords(landingDistanceM)} ${compassPoint(landingBearingDeg)} of the prediction`
}

function timeWords(seconds: number): string {
  if (Math.abs(seconds) < LEAST_SECONDS) return 'to the minute'
  return `${durationWords(Math.abs(seconds))} ${seconds > 0 ? 'later' : 'earlier'}`
}

function heightWords(metres: number): string {
  return `${reading('height', Math.abs(metres))} ${metres > 0 ? 'higher' : 'lower'}`
}
