import { airAge } from '../planning/airSource.ts'
import { membersAlongFlight } from '../planning/fieldCautions.ts'
import { columnsAlong } from '../planning/fieldColumns.ts'
import { type Summary } from '../planning/planningWorker.ts'
import { type PlanningPool } from '../planning/pool.ts'
import { predict } from '../planning/prediction.ts'
import { defaultSpread, spreadSources, type Input, type Spread } from '../planning/spread.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { type Airs } from './airs.ts'
import { areaFeature, toRegions } from './areas.ts'
import { toFlightPlan } from './flightPlan.ts'
import { type Work } from './jobRunner.ts'
import { predictionAnswer } from './runAnswer.ts'
import {
  type DispersionAnswer,
  type DispersionRequest,
  type SpreadRequest,
} from './schemas/dispersion.ts'
import { type Plan } from './schemas/plan.ts'
import { bearingDegrees, degrees, GRAMS, round } from './units.ts'

/** A dispersion with its plan filled in: what a job keeps. */
export interface PlannedDispersion extends DispersionRequest {
  flightId: string | null
  plan: Plan
}

/** Each input's name in the API, and how many of its units make an SI unit. */
const INPUTS: Record<Input, { member: keyof SpreadRequest; scale: number }> = {
  neckLift: { member: 'neckLiftG', scale: GRAMS },
  balloonMass: { member: 'balloonMassG', scale: GRAMS },
  burstDiameterShare: { member: 'burstDiameterShare', scale: 1 },
  dragShare: { member: 'dragShare', scale: 1 },
  dragAreaShare: { member: 'dragAreaShare', scale: 1 },
  shareLeftOnLine: { member: 'shareLeftOnLine', scale: 1 },
  releaseTime: { member: 'releaseTimeS', scale: 1 },
  wind: { member: 'windMs', scale: 1 },
}
const inputs = Object.keys(INPUTS) as Input[]

/** The spread of a request: what it gives, and defaults for the rest. `airAge` in s, null where unknown. */
export function toSpread(given: SpreadRequest, plan: FlightPlan, airAge: number | null): Spread {
  const spread = defaultSpread(plan, airAge)
  for (const input of inputs) {
    const { member, scale } = INPUTS[input]
    const value = given[member]
    if (value !== undefined) spread[input] = value / scale
  }
  return spread
}

/** Works a planned dispersion out to the JSON of its answer. */
export function dispersionWork(airs: Airs, pool: PlanningPool): Work {
  return async (request, signal, progress) => {
    const planned = request as PlannedDispersion
    const { plan, members, seed } = planned
    const source = airs.source(plan.air)
    const flightPlan = toFlightPlan(plan)
    const nominal = predictionAnswer(predict(flightPlan, source), plan)
    if (source.kind === 'field') {
      const { code, message } = membersAlongFlight
      nominal.cautions.push({ code, message })
    }
    const age = airAge(source, flightPlan.launch.time)
    const spread = toSpread(planned.spread, flightPlan, age)
    const summary = await pool.disperse(
      {
        plan: flightPlan,
        air: source.kind === 'field' ? columnsAlong(flightPlan, source) : source.recipe,
        spread,
        members,
        seed,
        regions: toRegions(planned.regions),
      },
      signal,
      progress,
    )
    return dispersionText(planned, spread, nominal, summary)
  }
}

/** Where the points' own text goes. */
const POINTS = '"points":[]'

function dispersionText(
  planned: PlannedDispersion,
  spread: Spread,
  nominal: ReturnType<typeof predictionAnswer>,
  { dispersion, points }: Summary,
): string {
  const { landing, burstAltitude } = dispersion
  const answer: DispersionAnswer = {
    flightId: planned.flightId,
    members: dispersion.members,
    seed: planned.seed,
    notFlown: dispersion.notFlown,
    spread: spreadAnswer(spread),
    spreadSources: inputs.map((input) => ({
      input: INPUTS[input].member,
      given: planned.spread[INPUTS[input].member] !== undefined,
      source: spreadSources[input],
    })),
    nominal: { burst: nominal.burst, landing: nominal.landing },
    burst: { altitudeM: quantilesAnswer(burstAltitude) },
    landing: {
      latitudeDeg: degrees(landing.mean.latitude),
      longitudeDeg: degrees(landing.mean.longitude),
      elapsedS: quantilesAnswer(landing.elapsed),
      ellipses: landing.ellipses.map(({ share, semiMajor, semiMinor, majorBearing }) => ({
        share,
        semiMajorM: round(semiMajor, 1),
        semiMinorM: round(semiMinor, 1),
        majorBearingDeg: bearingDegrees(majorBearing),
      })),
      regionsOfShare: {
        type: 'FeatureCollection',
        features: landing.regions.map(
          (region) =>
            areaFeature(region, {
              share: region.share,
              areaKm2: round(region.area / 1e6, 3),
            }) as DispersionAnswer['landing']['regionsOfShare']['features'][number],
        ),
      },
      points: [],
    },
    inRegions: dispersion.inRegions.map(({ name, share }) => ({ name, share: round(share, 5) })),
    causes: dispersion.causes.map(({ input, varianceShare }) => ({
      input: INPUTS[input].member,
      varianceShare: round(varianceShare, 4),
    })),
    standardErrorM: round(dispersion.standardError, 2),
    cautions: nominal.cautions,
  }
  return JSON.stringify(answer).replace(POINTS, () => `"points":${points}`)
}

function spreadAnswer(spread: Spread): DispersionAnswer['spread'] {
  const answer = Object.fromEntries(
    inputs.map((input) => [INPUTS[input].member, round(spread[input] * INPUTS[input].scale, 4)]),
  )
  return answer as DispersionAnswer['spread']
}

function quantilesAnswer({ p05, p50, p95 }: { p05: number; p50: number; p95: number }) {
  return { p05: round(p05, 1), p50: round(p50, 1), p95: round(p95, 1) }
}
