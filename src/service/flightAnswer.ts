import { type FlightRow, type FlightWithRuns } from '../store/flights.ts'
import { type Flight, type Miss, type Outcome } from './schemas/flight.ts'
import { type Plan } from './schemas/plan.ts'
import { type Run } from './schemas/run.ts'
import { geodesicLine } from '../planning/geodesic.ts'
import { place } from './runAnswer.ts'
import { bearingDegrees, round, seconds } from './units.ts'

/** A stored flight with its newest run in short. */
export function flightAnswer(row: FlightRow, runCount: number, latest: Run): Flight {
  return {
    id: row.id,
    title: row.title,
    createdAt: row.createdAt,
    updatedAt: row.updatedAt,
    plan: storedPlan(row),
    runCount,
    latestRun: runInShort(latest),
    outcome: row.outcome === null ? null : (JSON.parse(row.outcome) as Outcome),
  }
}

/** A run in short. */
export function runInShort(run: Run): Flight['latestRun'] {
  const { id, createdAt, air, shift, burst, landing } = run
  return {
    id,
    createdAt,
    air,
    shift,
    burst: { time: burst.time, altitudeM: burst.altitudeM },
    landing: {
      time: landing.time,
      latitudeDeg: landing.latitudeDeg,
      longitudeDeg: landing.longitudeDeg,
      distanceM: landing.distanceM,
      bearingDeg: landing.bearingDeg,
    },
  }
}

/** A flight's row, joined with its runs, as answered. */
export function storedFlight(row: FlightWithRuns): Flight {
  return flightAnswer(row, row.runCount, storedRun(row.latestAnswer))
}

/** The plan in a flight's row. */
export function storedPlan(row: FlightRow): Plan {
  return JSON.parse(row.plan) as Plan
}

/** A run as it was answered and stored. */
export function storedRun(answer: string): Run {
  return JSON.parse(answer) as Run
}

/** How far off what happened a run was: observed less predicted, null where nothing was observed. */
export function missOf(run: Run, outcome: Outcome): Miss {
  const { burst, landing } = outcome
  const line = landing && geodesicLine(place(run.landing), place(landing))
  return {
    runId: run.id,
    landingDistanceM: line ? round(line.distance, 1) : null,
    landingBearingDeg: line ? bearingDegrees(line.bearing) : null,
    landingTimeS: difference(landing?.time, run.landing.time),
    burstAltitudeM:
      burst?.altitudeM === undefined ? null : round(burst.altitudeM - run.burst.altitudeM, 3),
    burstTimeS: difference(burst?.time, run.burst.time),
  }
}

function difference(observed: string | undefined, predicted: string): number | null {
  return observed === undefined ? null : round(seconds(observed) - seconds(predicted), 3)
}
