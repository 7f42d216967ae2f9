import { type Run } from '../../service/schemas/run.ts'
import { compassPoint } from '../compass.ts'
import { distanceWords, durationWords } from '../distances.ts'
import { reading } from '../readings.ts'

type Shift = NonNullable<Run['shift']>

/** Below these a difference is not worth a word. */
const LEAST_METRES = 50
const LEAST_SECONDS = 30

/** How a run differs from the one before, as one would say it. */
export function shiftWords(shift: Shift | null): string {
  if (!shift) return 'first run of this flight'
  const parts = [landing(shift), later(shift.landingTimeS), higher(shift.burstAltitudeM)]
  const words = parts.filter((part) => part !== null).join(', ') || 'lands and bursts as before'
  return shift.planChanged ? `${words} (the plan was changed too)` : words
}

function landing({ landingDistanceM, landingBearingDeg }: Shift): string | null {
  if (landingDistanceM < LEAST_METRES) return null
  return `lands ${distanceWords(landingDistanceM)} further ${compassPoint(landingBearingDeg)}`
}

function later(seconds: number): string | null {
  if (Math.abs(seconds) < LEAST_SECONDS) return null
  return `${durationWords(Math.abs(seconds))} ${seconds > 0 ? 'later' : 'earlier'}`
}

function higher(metres: number): string | null {
  if (Math.abs(metres) < LEAST_METRES) return null
  return `bursts ${reading('height', Math.abs(metres))} ${metres > 0 ? 'higher' : 'lower'}`
}
