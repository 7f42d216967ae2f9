import { type DispersionAnswer } from '../../service/schemas/dispersion.ts'

export type SpreadName = keyof DispersionAnswer['spread']

interface SpreadInput {
  name: SpreadName
  label: string
  unit: string
  /** What one shown unit is in units of the API */
  one: number
}

/** What is uncertain about a flight, in the order in which it matters to whoever prepares it. */
export const spreadInputs: readonly SpreadInput[] = [
  { name: 'windMs', label: 'Wind', unit: 'm/s', one: 1 },
  { name: 'burstDiameterShare', label: 'Burst diameter', unit: '%', one: 0.01 },
  { name: 'neckLiftG', label: 'Neck lift', unit: 'g', one: 1 },
  { name: 'balloonMassG', label: 'Balloon mass', unit: 'g', one: 1 },
  { name: 'dragShare', label: 'Drag going up', unit: '%', one: 0.01 },
  { name: 'dragAreaShare', label: 'Parachute drag', unit: '%', one: 0.01 },
  { name: 'shareLeftOnLine', label: 'Balloon left on the line', unit: '%', one: 0.01 },
  { name: 'releaseTimeS', label: 'Release time', unit: 'min', one: 60 },
]

/** Standard deviations as they are typed; an empty one leaves the service's own. */
export type SpreadDraft = Record<SpreadName, string>

export const emptySpread = Object.fromEntries(
  spreadInputs.map(({ name }) => [name, '']),
) as SpreadDraft

export function isSpread(value: unknown): value is SpreadDraft {
  return (
    typeof value === 'object' &&
    value !== null &&
    spreadInputs.every(({ name }) => typeof (value as Record<string, unknown>)[name] === 'string')
  )
}
