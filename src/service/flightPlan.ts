import { type FlightPlan } from '../physics/flight.ts'
import { type Parachute } from '../physics/parachute.ts'
import { type Plan } from './schemas/plan.ts'
import { DEGREE, GRAMS, seconds } from './units.ts'

/** A plan of the API as the flight model's: converted once, here. */
export function toFlightPlan(plan: Plan): FlightPlan {
  const { launch, balloon, gas } = plan
  return {
    launch: {
      latitude: launch.latitudeDeg * DEGREE,
      longitude: launch.longitudeDeg * DEGREE,
      altitude: launch.altitudeM,
      time: seconds(launch.time),
    },
    balloon: {
      mass: balloon.massG / GRAMS,
      ratedBurstDiameter: balloon.ratedBurstDiameterM,
      shareLeftOnLine: balloon.shareLeftOnLine,
    },
    gas: { kind: gas.kind, purity: gas.purity, temperatureOffset: gas.temperatureOffsetK },
    neckLift: plan.neckLiftG / GRAMS,
    payloadMass: plan.payload.massG / GRAMS,
    parachute: toParachute(plan.parachute),
    drag: plan.drag,
    landingAltitude: plan.landingAltitudeM,
  }
}

function toParachute(parachute: Plan['parachute']): Parachute {
  if ('dragAreaM2' in parachute) return { dragArea: parachute.dragAreaM2 }
  if ('diameterM' in parachute) {
    return { diameter: parachute.diameterM, dragCoefficient: parachute.dragCoefficient }
  }
  return { seaLevelDescent: parachute.seaLevelDescentMs }
}
