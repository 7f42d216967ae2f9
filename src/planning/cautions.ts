import { type AltitudeSpan } from '../physics/air.ts'
import { dragCurve } from '../physics/dragCurves.ts'
import { type Flight, type FlightPlan } from '../physics/flight.ts'
import { type ColumnSource } from './airSource.ts'
import { geodesicLine } from './geodesic.ts'

/** Something that weakens a prediction, or that whoever acts on it must heed. */
export interface Caution {
  code: CautionCode
  /** One or two plain sentences for the person who releases the balloon */
  message: string
  /** The altitudes, m above mean sea level, that it is about, where it is about some */
  span?: AltitudeSpan
}

export type CautionCode =
  | 'airspace-notification'
  | 'still-air'
  | 'standard-temperatures'
  | 'temperature-continued'
  | 'wind-held'
  | 'below-sounding'
  | 'air-of-another-time'
  | 'air-of-another-place'
  | 'beyond-forecast-grid'
  | 'beyond-forecast-times'
  | 'above-forecast'
  | 'below-forecast'
  | 'far-ahead-forecast'
  | 'members-along-flight'
  | 'drag-beyond-fit'
  | 'slow-release'
  | 'hard-landing'
  | 'hydrogen'

/** Air older or newer than this at release is said to be of another time, s: half a synoptic interval. */
const FRESH_AIR = 6 * 3600

/** Air observed farther than this from the site is said to be of another place, m. An assumption. */
const NEAR_AIR = 150_000

/** Landing faster than this is called hard, m/s. Common practice aims at about 5 m/s. */
const HARD_LANDING = 6

/** Rising slower than this at release is called slow, m/s. Common practice: 5 m/s, seldom under 3. */
const SLOW_RELEASE = 2.5

/** The standing line of every prediction. */
export const airspaceNotification: Caution = {
  code: 'airspace-notification',
  message:
    'Airspace notification follows local regulation: tell the competent authority in time; it decides. This prediction is no permission.',
}

/** What to heed in a predicted flight, the standing line first. */
export function cautionsFor(plan: FlightPlan, flight: Flight, source: ColumnSource): Caution[] {
  return [
    airspaceNotification,
    ...airCautions(plan, flight, source),
    ...sourceCautions(plan, source),
    ...flightCautions(plan, flight),
  ]
}

function* airCautions(plan: FlightPlan, flight: Flight, source: ColumnSource): Iterable<Caution> {
  if (source.kind === 'standard') {
    yield {
      code: 'still-air',
      message:
        'Flown in the standard atmosphere without wind: heights and times are typical, the landing place means nothing. Choose a sounding.',
    }
    return
  }
  const { temperature, wind } = source.column.air.observed
  const lowest = Math.min(plan.launch.altitude, plan.landingAltitude)
  const highest = flight.burst.altitude
  if (!temperature) {
    yield {
      code: 'standard-temperatures',
      message:
        'The sounding has wind only: temperature and pressure are the standard atmosphere’s.',
    }
  } else if (highest > temperature.top) {
    const span = { bottom: temperature.top, top: highest }
    yield {
      code: 'temperature-continued',
      message: `The sounding’s temperatures end at ${metres(temperature.top)}: continued in the shape of the standard atmosphere from there to the burst at ${metres(highest)}.`,
      span,
    }
  }
  if (wind && highest > wind.top) {
    yield {
      code: 'wind-held',
      message: `The sounding’s winds end at ${metres(wind.top)}: the wind of that level is held from there to the burst at ${metres(highest)}.`,
      span: { bottom: wind.top, top: highest },
    }
  }
  const floor = Math.max(wind?.bottom ?? -Infinity, temperature?.bottom ?? -Infinity)
  if (lowest < floor - 1) {
    yield {
      code: 'below-sounding',
      message: `The sounding begins at ${metres(floor)}: from ${metres(lowest)} to there its lowest wind is held and the air warms by 6.5 K/km downwards.`,
      span: { bottom: lowest, top: floor },
    }
  }
}

function* sourceCautions(plan: FlightPlan, source: ColumnSource): Iterable<Caution> {
  if (source.validAt !== null) {
    const age = plan.launch.time - source.validAt
    if (Math.abs(age) > FRESH_AIR) {
      const hours = Math.round(Math.abs(age) / 3600)
      const much = hours > 72 ? `${Math.round(hours / 24)} days` : `${hours} h`
      yield {
        code: 'air-of-another-time',
        message: `The air was valid ${much} ${age > 0 ? 'before' : 'after'} the release: fly it again in newer air.`,
      }
    }
  }
  if (source.position) {
    const { distance } = geodesicLine(source.position, plan.launch)
    if (distance > NEAR_AIR) {
      yield {
        code: 'air-of-another-place',
        message: `The air was observed ${Math.round(distance / 1000)} km from the launch site.`,
      }
    }
  }
}

/** What to heed in a flight, whatever air it was flown in. */
export function* flightCautions(plan: FlightPlan, flight: Flight): Iterable<Caution> {
  const { fitted } = dragCurve(plan.drag)
  const { lowestReynolds, highestReynolds, releaseRate } = flight.ascent
  if (lowestReynolds < fitted.from || highestReynolds > fitted.to) {
    yield {
      code: 'drag-beyond-fit',
      message: `The Reynolds number runs from ${roughly(lowestReynolds)} to ${roughly(highestReynolds)}; the drag curve was fitted from ${roughly(fitted.from)} to ${roughly(fitted.to)} and is held beyond.`,
    }
  }
  if (releaseRate < SLOW_RELEASE) {
    yield {
      code: 'slow-release',
      message: `The balloon leaves at ${releaseRate.toFixed(1)} m/s: it drifts far and a gust may push it into obstacles. 4 to 6 m/s is common practice.`,
    }
  }
  if (flight.landing.speed > HARD_LANDING) {
    yield {
      code: 'hard-landing',
      message: `The load lands at ${flight.landing.speed.toFixed(1)} m/s; about 5 m/s is common practice. Choose a larger parachute where people may be below.`,
    }
  }
  if (plan.gas.kind === 'hydrogen') {
    yield {
      code: 'hydrogen',
      message:
        'Hydrogen burns and explodes in mixtures with air: no flame, no spark, earthed gear, trained hands; local codes and licensed practice decide.',
    }
  }
}

function metres(altitude: number): string {
  return `${Math.round(altitude)} m`
}

function roughly(reynolds: number): string {
  return reynolds.toExponential(1)
}
