import { fly, flyAlongPath, type Flight, type FlightPlan } from '../physics/flight.ts'
import { TrackRecorder, type TrackPoint } from '../physics/track.ts'
import { type AirSource } from './airSource.ts'
import { cautionsFor, type Caution } from './cautions.ts'
import { fieldCautions } from './fieldCautions.ts'
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
 * @throws NotFlyable; OutsideField where it leaves a forecast that is to be refused beyond
 */
export function predict(plan: FlightPlan, source: AirSource): Prediction {
  const recorder = new TrackRecorder()
  if (source.kind === 'field') source.field.takeUse() // of whoever flew before
  const flight =
    source.kind === 'field'
      ? flyAlongPath(plan, source.field, recorder)
      : fly(plan, source.column, recorder)
  const cautions =
    source.kind === 'field'
      ? fieldCautions(plan, flight, source, source.field.takeUse())
      : cautionsFor(plan, flight, source)
  return {
    flight,
    track: recorder.track(),
    reach: geodesicLine(plan.launch, flight.landing),
    cautions,
  }
}
