import { type FieldUse } from '../fields/fieldAir.ts'
import { type Flight, type FlightPlan } from '../physics/flight.ts'
import { type FieldSource } from './airSource.ts'
import { airspaceNotification, flightCautions, type Caution } from './cautions.ts'

/** A forecast that was run longer than this before the release is said to look far ahead, s. An assumption. */
const FAR_AHEAD = 72 * 3600

/** Said of dispersions and surveys in a forecast. */
export const membersAlongFlight: Caution = {
  code: 'members-along-flight',
  message:
    'The members fly in the air along the flight of the plan itself, up and down: a member that drifts elsewhere does not meet the air there.',
}

/** What to heed in a flight predicted in a forecast, the standing line first. */
export function fieldCautions(
  plan: FlightPlan,
  flight: Flight,
  source: FieldSource,
  use: FieldUse,
): Caution[] {
  return [airspaceNotification, ...useCautions(plan, source, use), ...flightCautions(plan, flight)]
}

function* useCautions(
  plan: FlightPlan,
  { referenceTime }: FieldSource,
  { heldPlace, heldTime, aboveLevels, belowLevels }: FieldUse,
): Iterable<Caution> {
  if (heldPlace) {
    yield {
      code: 'beyond-forecast-grid',
      message:
        'Part of the flight lies beyond the forecast’s grid: the air of the nearest place on its edge is held there.',
    }
  }
  if (heldTime) {
    yield {
      code: 'beyond-forecast-times',
      message:
        'Part of the flight lies before or after the forecast’s valid times: the air of the nearest time is held there.',
    }
  }
  if (aboveLevels) {
    const { bottom, top } = aboveLevels
    yield {
      code: 'above-forecast',
      message: `The forecast’s levels end at ${metres(bottom)}: from there to ${metres(top)} the highest wind is held and the temperature continued in the shape of the standard atmosphere.`,
      span: aboveLevels,
    }
  }
  if (belowLevels) {
    const { bottom, top } = belowLevels
    yield {
      code: 'below-forecast',
      message: `The forecast’s levels begin at ${metres(top)}: from ${metres(bottom)} to there the lowest wind is held and the air warms by 6.5 K/km downwards.`,
      span: belowLevels,
    }
  }
  const ahead = plan.launch.time - referenceTime
  if (ahead > FAR_AHEAD) {
    yield {
      code: 'far-ahead-forecast',
      message: `The forecast was run ${Math.round(ahead / 3600)} h before the release: fly it again in a newer one.`,
    }
  }
}

function metres(altitude: number): string {
  return `${Math.round(altitude)} m`
}
