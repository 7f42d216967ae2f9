import { type FlightPlan } from '../../src/physics/flight.ts'

export const DEGREE = Math.PI / 180

/** What a test changes of the flight below. */
interface Changes extends Partial<Omit<FlightPlan, 'launch' | 'balloon'>> {
  altitude?: number
  latitude?: number
  longitude?: number
  balloon?: Partial<FlightPlan['balloon']>
}

/** A 1.2 kg balloon with 1.5 kg below it, from 450 m in the Alpine foreland. */
export function standardFlight(changes: Changes = {}): FlightPlan {
  const { altitude = 450, latitude = 47.05, longitude = 8.31, balloon, ...rest } = changes
  return {
    launch: {
      latitude: latitude * DEGREE,
      longitude: longitude * DEGREE,
      altitude,
      time: Date.UTC(2026, 11, 5, 9) / 1000,
    },
    balloon: { mass: 1.2, ratedBurstDiameter: 8.6, shareLeftOnLine: 0, ...balloon },
    gas: { kind: 'helium', purity: 1, temperatureOffset: 0 },
    neckLift: 2.6,
    payloadMass: 1.5,
    parachute: { dragArea: 0.9 },
    drag: { curve: 'sounding-balloon' },
    landingAltitude: altitude,
    ...rest,
  }
}
