import { type FlightPlan } from '../physics/flight.ts'

/** Standard deviations of what a prediction takes for certain, SI; 0 switches one off. */
export interface Spread {
  /** kg */
  neckLift: number
  /** kg */
  balloonMass: number
  /** Of the logarithm of the burst diameter */
  burstDiameterShare: number
  /** Of the logarithm of the drag curve's factor */
  dragShare: number
  /** Of the logarithm of the parachute's drag area */
  dragAreaShare: number
  /** Of the share of the balloon left on the line; reflected into 0 to 1 */
  shareLeftOnLine: number
  /** s */
  releaseTime: number
  /** Root-mean-square vector error of the wind between 1000 and 100 hPa, m/s */
  wind: number
}

export type Input = keyof Spread

/** The inputs in the order of their coordinates; the wind's come last, two for each of its modes. */
export const SCALAR_INPUTS = [
  'neckLift',
  'balloonMass',
  'burstDiameterShare',
  'dragShare',
  'dragAreaShare',
  'shareLeftOnLine',
  'releaseTime',
] as const satisfies readonly Input[]

/** Vector wind error of 6 h forecasts against radiosondes between 1000 and 100 hPa, m/s: published verification. */
const SIX_HOUR_WIND_ERROR = 4

/** Share of that error's square that even air of this minute has: sampling and instrument. An assumption. */
const FRESH_SHARE = 0.25

/** No error grows beyond the wind's own variability, m/s. An assumption. */
const MOST_WIND_ERROR = 20

/** Age taken for air that has no time, s. An assumption. */
const AGE_WITHOUT_TIME = 6 * 3600

/**
 * The spread that a dispersion takes unless told otherwise. `airAge` is how long before (or after) the
 * release the air was valid, s; null where it has no time. Where each comes from stands in `spreadSources`.
 */
export function defaultSpread(plan: FlightPlan, airAge: number | null): Spread {
  return {
    neckLift: Math.max(0.02, 0.03 * plan.neckLift),
    balloonMass: 0.02 * plan.balloon.mass,
    burstDiameterShare: 0.06,
    dragShare: 0.1,
    dragAreaShare: 0.1,
    shareLeftOnLine: 0.1,
    releaseTime: 600,
    wind: windError(airAge ?? AGE_WITHOUT_TIME),
  }
}

/** Vector wind error of air of an age in s, m/s: its square grows evenly with age, through 4 m/s at 6 h. */
export function windError(airAge: number): number {
  const sixHours = Math.abs(airAge) / (6 * 3600)
  const square = FRESH_SHARE + (1 - FRESH_SHARE) * sixHours
  return Math.min(MOST_WIND_ERROR, SIX_HOUR_WIND_ERROR * Math.sqrt(square))
}

/** Where each default comes from, for the people who read the answer. */
export const spreadSources: Record<Input, string> = {
  neckLift:
    'Assumption: 3 % of the neck lift, at least 20 g, for reading a weigher on a moving balloon; normal.',
  balloonMass: 'Assumption: 2 % of the balloon’s mass; normal.',
  burstDiameterShare:
    'Assumption: 6 % of the burst diameter. Shape: weakest-link strength (Weibull, J. Appl. Mech. 18, 1951, p. 293), so that low bursts stray farther than high ones; its geometric mean is the rated diameter.',
  dragShare:
    'The default drag curve meets tabulated rates of ascent (WMO-No. 8) within 10 %, that is drag within 20 %: taken as two standard deviations; log-normal.',
  dragAreaShare:
    'Published drag coefficients of one kind of parachute span about ±10 % (Knacke, NWC TP 6575, table 5-1); log-normal.',
  shareLeftOnLine: 'Assumption: 0.1, reflected at 0 and 1.',
  releaseTime:
    'Assumption: 10 minutes; normal. In air that does not change with time it moves the landing in time, not in place.',
  wind: 'Vector error of 4 m/s rms between 1000 and 100 hPa for air 6 h old (6 h forecasts verified against radiosondes). Assumptions: its square grows evenly with age from a quarter of that for fresh air, to 20 m/s at most; it grows with height from 2.6 m/s at sea level to 5.2 m/s at 16 km and 7.9 m/s at 32 km; errors 2 km apart in height correlate by 0.61; both components alike.',
}
