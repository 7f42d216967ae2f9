import { MODEL_VERSION } from '../physics/flight.ts'
import { type AirSource } from '../planning/airSource.ts'
import { type Caution } from '../planning/cautions.ts'
import { geodesicLine } from '../planning/geodesic.ts'
import { type Prediction } from '../planning/prediction.ts'
import { type Plan } from './schemas/plan.ts'
import { type Run, type Trial } from './schemas/run.ts'
import {
  bearingDegrees,
  DEGREE,
  degrees,
  GRAMS,
  HECTOPASCAL,
  isoTime,
  round,
  seconds,
} from './units.ts'

type PredictionAnswer = Pick<Run, 'fill' | 'ascent' | 'burst' | 'descent' | 'landing' | 'cautions'>

/** A prediction in the names and units of the API. */
export function predictionAnswer(prediction: Prediction, plan: Plan): PredictionAnswer {
  const { flight, reach, cautions } = prediction
  const { fill, ascent, burst, descent, landing } = flight
  const release = seconds(plan.launch.time)
  return {
    fill: {
      grossLiftG: round(fill.grossLift * GRAMS, 3),
      neckLiftG: round(fill.neckLift * GRAMS, 3),
      freeLiftG: round(fill.freeLift * GRAMS, 3),
      volumeM3: round(fill.volume, 5),
      diameterM: round(fill.diameter, 4),
      gasMassG: round(fill.gasMass * GRAMS, 2),
    },
    ascent: {
      releaseRateMs: round(ascent.releaseRate, 3),
      meanRateMs: round(ascent.meanRate, 3),
      durationS: round(ascent.duration, 3),
    },
    burst: {
      time: isoTime(release + burst.elapsed),
      elapsedS: round(burst.elapsed, 3),
      latitudeDeg: degrees(burst.latitude),
      longitudeDeg: degrees(burst.longitude),
      altitudeM: round(burst.altitude, 3),
      pressureHPa: round(burst.pressure / HECTOPASCAL, 4),
      airTemperatureK: round(burst.temperature, 2),
      diameterM: round(burst.diameter, 4),
    },
    descent: {
      durationS: round(descent.duration, 3),
      peakSpeedMs: round(descent.peakSpeed, 2),
      dragAreaM2: round(descent.dragArea, 5),
    },
    landing: {
      time: isoTime(release + landing.elapsed),
      elapsedS: round(landing.elapsed, 3),
      latitudeDeg: degrees(landing.latitude),
      longitudeDeg: degrees(landing.longitude),
      altitudeM: round(landing.altitude, 3),
      speedMs: round(landing.speed, 3),
      distanceM: round(reach.distance, 1),
      bearingDeg: bearingDegrees(reach.bearing),
    },
    cautions: cautions.map(cautionAnswer),
  }
}

/** A prediction as the answer of a trial: a run with no identity. */
export function trialAnswer(
  prediction: Prediction,
  plan: Plan,
  source: AirSource,
  createdAt: string,
): Trial {
  return {
    id: null,
    flightId: null,
    createdAt,
    modelVersion: MODEL_VERSION,
    air: flownAir(source, seconds(plan.launch.time)),
    plan,
    ...predictionAnswer(prediction, plan),
    shift: null,
  }
}

/** How a run differs from the one before: new less old. */
export function shiftBetween(
  run: Pick<Run, 'landing' | 'burst' | 'plan'>,
  before: Run,
): NonNullable<Run['shift']> {
  const line = geodesicLine(place(before.landing), place(run.landing))
  return {
    againstRunId: before.id,
    landingDistanceM: round(line.distance, 1),
    landingBearingDeg: bearingDegrees(line.bearing),
    landingTimeS: round(seconds(run.landing.time) - seconds(before.landing.time), 3),
    burstAltitudeM: round(run.burst.altitudeM - before.burst.altitudeM, 3),
    planChanged: fliesDifferently(run.plan, before.plan),
  }
}

/** A place of the API in radians. */
export function place(at: { latitudeDeg: number; longitudeDeg: number }) {
  return { latitude: at.latitudeDeg * DEGREE, longitude: at.longitudeDeg * DEGREE }
}

function flownAir(source: AirSource, release: number): Run['air'] {
  if (source.kind === 'field') {
    const { firstTime, lastTime } = source.field.file.coverage
    return {
      kind: source.kind,
      id: source.id,
      name: source.name,
      validAt: isoTime(Math.min(lastTime, Math.max(firstTime, release))),
      referenceTime: isoTime(source.referenceTime),
    }
  }
  return {
    kind: source.kind,
    ...(source.id === null ? {} : { id: source.id }),
    name: source.name,
    validAt: source.validAt === null ? null : isoTime(source.validAt),
  }
}

function cautionAnswer({ code, message, span }: Caution): Run['cautions'][number] {
  if (!span) return { code, message }
  return {
    code,
    message,
    fromAltitudeM: round(span.bottom, 1),
    toAltitudeM: round(span.top, 1),
  }
}

/** Whether two plans fly differently in the same air. */
export function fliesDifferently(one: Plan, other: Plan): boolean {
  return flownPart(one) !== flownPart(other)
}

/** Without what does not change the flight: its air, and how its load is made up. */
function flownPart({ air: _air, payload, ...plan }: Plan): string {
  return JSON.stringify({ ...plan, payload: payload.massG })
}
