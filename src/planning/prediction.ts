import { fly, type Flight, type FlightPlan } from '../physics/flight.ts'
import { TrackRecorder, type TrackPoint } from '../physics/track.ts'
import { type AirSource } from './airSource.ts'
import { cautionsFor, type Caution } from './cautions.ts'
import { geodesicLine, type GeodesicLine } from './geodesic.ts'

/** A flown plan with what a launch director needs beside the numbers. SI. */
export interface Prediction {
  flight: Flight
  /** Burst and landing stand on its points. */
  track: TrackPoint[]
  /** From the launch site to the landing */
  reach: GeodesicLine
  cautions: Caution[]
}

/**
 * Predicts one flight in given air, with its track.
 * @throws NotFlyable
 */
export function predict(plan: FlightPlan, source: AirSource): Prediction {
  const recorder = new TrackRecorder()
  const flight = fly(plan, source.column, recorder)
  return {
    flight,
    track: recorder.track(),
    reach: geodesicLine(plan.launch, flight.landing),
    cautions: cautionsFor(plan, flight, source),
  }
}
