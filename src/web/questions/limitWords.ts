import { plainNumber, reading } from '../readings.ts'
import { areaWords } from './areaWords.ts'
import { type TriedTime } from './timeStrip.tsx'

type Check = TriedTime['checks'][number]

/** Each limit as a launch director says it. */
export const LIMITS: Record<Check['limit'], string> = {
  landingInside: 'Lands in a wanted area',
  landingOutside: 'Lands outside the areas to avoid',
  landingDistanceAtLeast: 'Lands far enough off',
  landingDistanceAtMost: 'Lands near enough',
  sunElevation: 'Sun at the landing',
  burstAltitudeAtLeast: 'Bursts high enough',
  burstAltitudeAtMost: 'Bursts low enough',
  region90: 'Area of 90 % of the landings',
  groundWind: 'Wind at the fill',
}

/** An amount of what a limit bounds, with its unit. */
export function limitAmount({ limit, unit }: Check, amount: number): string {
  switch (unit) {
    case 'deg':
      return `${plainNumber(amount, 1)}°`
    case 'km2':
      return areaWords(amount)
    case 'm/s':
      return reading('windSpeed', amount, 1)
    case 'm':
      return limit.startsWith('burst')
        ? reading('height', amount)
        : reading('distance', amount, Math.abs(amount) < 20_000 ? 1 : 0)
  }
}

/** What came of it; an area says how deep inside or how far outside. */
export function limitValue(check: Check): string {
  if (check.limit !== 'landingInside' && check.limit !== 'landingOutside') {
    return limitAmount(check, check.value)
  }
  const where = check.value >= 0 ? 'inside' : 'outside'
  return `${limitAmount(check, Math.abs(check.value))} ${where}`
}

/** Kept or failed, and by how much. */
export function marginWords(check: Check): string {
  const amount = limitAmount(check, Math.abs(check.margin))
  return check.kept ? `✓ kept by ${amount}` : `✕ fails by ${amount}`
}
