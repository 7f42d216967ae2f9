import { fly, type Flight, type FlightPlan } from '../physics/flight.ts'
import { TrackRecorder, type TrackPoint } from '../physics/track.ts'
import { type AirSource } from './airSource.ts'
import { cautionsFor, type Caution } from './cautions.ts'
import { geodesicLine, type GeodesicLine } from './geodesic.ts'

/** A flown plan with what a launch director needs beside the numbers. SI. */
export interface Prediction {
  flight: Flight
  /** From the launch site to the landing */
  reach: GeodesicLine
  cautions: Caution[]
}

/**
 * Predicts a flight in given air.
 * @throws NotFlyable
 */
export function predict(plan: FlightPlan, source: AirSource, recorder?: TrackRecorder): Prediction {
  const flight = fly(plan, source.column, recorder)
  return {
    flight,
    reach: geodesicLine(plan.launch, flight.landing),
    cautions: cautionsFor(plan, flight, source),
  }
}

/**
 * Predicts a flight with its track.
 * @throws NotFlyable
 */
export function predictWithTrack(
  plan: FlightPlan,
  source: AirSource,
): { prediction: Prediction; track: TrackPoint[] } {
  const recorder = new TrackRecorder()
  const prediction = predict(plan, source, recorder)
  return { prediction, track: recorder.track(source.column.air, plan.launch.time) }
}
