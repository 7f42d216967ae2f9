import { type AirRecipe } from '../planning/airRecipe.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { NotFlyable } from '../physics/notFlyable.ts'
import { setImmediate } from 'node:timers/promises'
import { OutsideField } from '../fields/outsideField.ts'
import { airOfTime, type AirOfTime } from '../planning/airOfTime.ts'
import { airAge, type AirSource, type ColumnSource } from '../planning/airSource.ts'
import { airspaceNotification, type Caution } from '../planning/cautions.ts'
import { membersAlongFlight } from '../planning/fieldCautions.ts'
import { columnsAlong } from '../planning/fieldColumns.ts'
import { geodesicLine } from '../planning/geodesic.ts'
import { type PlanningPool } from '../planning/pool.ts'
import { type Survey, type SurveyedTime } from '../planning/survey.ts'
import {
  rank,
  sunElevation,
  type LimitCheck,
  type LimitName,
  type WindowLimits,
} from '../planning/windows.ts'
import { type Airs } from './airs.ts'
import { toRegions } from './areas.ts'
import { toSpread } from './dispersions.ts'
import { toFlightPlan } from './flightPlan.ts'
import { type Work } from './jobRunner.ts'
import { describeNotFlyable } from './notFlyableAnswer.ts'
import { describeOutside } from './outsideFieldAnswer.ts'
import { faultyRequest } from './problems.ts'
import { place } from './runAnswer.ts'
import { type Plan } from './schemas/plan.ts'
import {
  MOST_TIMES,
  type LimitsRequest,
  type WindowsAnswer,
  type WindowsRequest,
} from './schemas/windows.ts'
import { bearingDegrees, DEGREE, degrees, isoTime, round, seconds } from './units.ts'

/** A survey of release times with its plan filled in: what a job keeps. */
export interface PlannedWindows extends Omit<WindowsRequest, 'plan'> {
  plan: Plan
}

/** Members flown at each time where the region of 90 % has a limit and nobody says how many. */
const USUAL_MEMBERS = 256

/** Air farther from the release than this is said to be of another time, s: half a synoptic interval. */
const FRESH_AIR = 6 * 3600

/** Each limit's name and unit in the API, and what an SI unit makes of them. */
const LIMITS: Record<
  LimitName,
  {
    limit: WindowsAnswer['times'][number]['checks'][number]['limit']
    unit: 'm' | 'deg' | 'km2' | 'm/s'
    scale: number
  }
> = {
  landingInside: { limit: 'landingInside', unit: 'm', scale: 1 },
  landingOutside: { limit: 'landingOutside', unit: 'm', scale: 1 },
  landingDistanceAtLeast: { limit: 'landingDistanceAtLeast', unit: 'm', scale: 1 },
  landingDistanceAtMost: { limit: 'landingDistanceAtMost', unit: 'm', scale: 1 },
  sunElevationAtLanding: { limit: 'sunElevation', unit: 'deg', scale: 1 / DEGREE },
  burstAltitudeAtLeast: { limit: 'burstAltitudeAtLeast', unit: 'm', scale: 1 },
  burstAltitudeAtMost: { limit: 'burstAltitudeAtMost', unit: 'm', scale: 1 },
  regionArea: { limit: 'region90', unit: 'km2', scale: 1e-6 },
  groundWind: { limit: 'groundWind', unit: 'm/s', scale: 1 },
}

/** The release times of a request, s since 1970 UTC. @throws Problem 422 where they are none or too many */
export function releaseTimes(
  request: Pick<WindowsRequest, 'from' | 'to' | 'stepMinutes'>,
): number[] {
  const from = seconds(request.from)
  const to = seconds(request.to)
  const step = request.stepMinutes * 60
  const count = Math.floor((to - from) / step + 1e-9) + 1
  if (count < 1) {
    throw faultyRequest(422, [{ path: '/to', message: `must not lie before ${request.from}` }])
  }
  if (count > MOST_TIMES) {
    const enough = Math.ceil((to - from) / (MOST_TIMES - 1) / 60)
    const message = `makes ${count} release times of this span, more than ${MOST_TIMES}: ${enough} would do`
    throw faultyRequest(422, [{ path: '/stepMinutes', message }])
  }
  return Array.from({ length: count }, (_, i) => from + i * step)
}

/** The airs that a survey flies in; null for a forecast, whose air is another at each time. @throws Problem 422 where one is not there or has no time of its own */
export function surveyedAirs(request: PlannedWindows, airs: Airs): ColumnSource[] | null {
  const { profileIds, plan } = request
  if (!profileIds) {
    const source = airs.source(plan.air)
    return source.kind === 'field' ? null : [source]
  }
  const sources = profileIds.map((id) => airs.profile(id))
  if (sources.length === 1) return sources
  const seen = new Set<number>()
  sources.forEach(({ name, validAt }, i) => {
    const path = `/profileIds/${i}`
    if (validAt === null) {
      const message = `names ${name}, which has no time: several soundings need one each`
      throw faultyRequest(422, [{ path, message }])
    }
    if (seen.has(validAt)) {
      const message = `names a second sounding of ${isoTime(validAt)}: several soundings need different times`
      throw faultyRequest(422, [{ path, message }])
    }
    seen.add(validAt)
  })
  return sources
}

/** The air of one release time, or why a plan cannot be flown in it. */
interface SurveyedAir extends Omit<AirOfTime, 'recipe'> {
  recipe: AirRecipe | NotFlyable | OutsideField
}

/** The air that a plan's flight meets in a forecast. */
function airInField(source: AirSource, plan: FlightPlan): SurveyedAir {
  if (source.kind !== 'field') throw new Error('a forecast was asked for')
  const air = { how: 'single', sources: [source], age: airAge(source, plan.launch.time) } as const
  try {
    return { ...air, sources: [source], recipe: columnsAlong(plan, source) }
  } catch (error) {
    if (!(error instanceof NotFlyable) && !(error instanceof OutsideField)) throw error
    return { ...air, sources: [source], recipe: error }
  }
}

/** Works a survey of release times out to the JSON of its answer. */
export function windowsWork(airs: Airs, pool: PlanningPool): Work {
  return async (request, signal, progress) => {
    const planned = request as PlannedWindows
    const limits = toLimits(planned.limits)
    const members = planned.members ?? (limits.regionArea === undefined ? 0 : USUAL_MEMBERS)
    if (limits.regionArea !== undefined && members < 100) {
      const message = `must be at least 100 for the limit region90Km2, is ${members}`
      throw faultyRequest(422, [{ path: '/members', message }])
    }
    const sources = surveyedAirs(planned, airs)
    const times = releaseTimes(planned)
    const flown: { air: SurveyedAir; survey: Survey }[] = []
    for (const time of times) {
      const plan = toFlightPlan(planned.plan)
      plan.launch.time = time
      const air =
        sources === null
          ? airInField(airs.source(planned.plan.air), plan)
          : airOfTime(sources, time, planned.betweenProfiles)
      const spread = toSpread(planned.spread, plan, air.age)
      flown.push({ air, survey: { plan, members, spread, seed: planned.seed, limits } })
      if (sources === null) await setImmediate() // a flight in a forecast for each time takes a while
      signal.throwIfAborted()
    }
    const surveyedFlyable = await pool.survey(
      flown.flatMap(({ air: { recipe }, survey }) =>
        recipe instanceof Error ? [] : [{ air: recipe, survey }],
      ),
      signal,
      progress,
    )
    let next = 0
    const surveyed = flown.map(({ air: { recipe } }) =>
      recipe instanceof Error ? recipe : surveyedFlyable[next++],
    )
    const checks = surveyed.map((one) => (one instanceof Error ? null : one.checks))
    const order = rank(checks)
    const answer: WindowsAnswer = {
      seed: planned.seed,
      members,
      times: times.map((time, i) => ({
        time: isoTime(time),
        rank: order.indexOf(i) + 1,
        passes: checks[i]?.every(({ margin }) => margin >= 0) ?? false,
        air: airAnswer(flown[i].air),
        ...figuresAnswer(surveyed[i], time, planned.plan),
        checks: (checks[i] ?? []).map(checkAnswer),
      })),
      ranking: order.map((i) => isoTime(times[i])),
      cautions: cautionsOf(
        flown.map(({ air }) => air),
        members > 0,
      ),
    }
    return JSON.stringify(answer)
  }
}

function toLimits(limits: LimitsRequest): WindowLimits {
  const { landingInside, landingOutside, landingDistanceM, sunElevationDeg } = limits
  const { burstAltitudeM, region90Km2, groundWindMs } = limits
  return {
    ...(landingInside ? { landingInside: toRegions(landingInside) } : {}),
    ...(landingOutside ? { landingOutside: toRegions(landingOutside) } : {}),
    ...(landingDistanceM
      ? { landingDistance: { from: place(landingDistanceM), ...range(landingDistanceM) } }
      : {}),
    ...(sunElevationDeg === undefined ? {} : { sunElevationAtLanding: sunElevationDeg * DEGREE }),
    ...(burstAltitudeM ? { burstAltitude: range(burstAltitudeM) } : {}),
    ...(region90Km2 === undefined ? {} : { regionArea: region90Km2 * 1e6 }),
    ...(groundWindMs === undefined ? {} : { groundWind: groundWindMs }),
  }
}

function range({ atLeast, atMost }: { atLeast?: number | undefined; atMost?: number | undefined }) {
  return {
    ...(atLeast === undefined ? {} : { atLeast }),
    ...(atMost === undefined ? {} : { atMost }),
  }
}

function airAnswer({ how, sources, age }: SurveyedAir) {
  return { how, names: sources.map(({ name }) => name), ageS: age === null ? null : round(age, 0) }
}

function figuresAnswer(
  surveyed: SurveyedTime | NotFlyable | OutsideField,
  time: number,
  plan: Plan,
) {
  if (surveyed instanceof NotFlyable) {
    return { notFlyable: describeNotFlyable(surveyed.reason).message, figures: null }
  }
  if (surveyed instanceof OutsideField) {
    return { notFlyable: describeOutside(surveyed).message, figures: null }
  }
  const { landing, releaseRate, burstAltitude, groundWind, regionArea } = surveyed.figures
  const reach = geodesicLine(place(plan.launch), landing)
  return {
    notFlyable: null,
    figures: {
      releaseRateMs: round(releaseRate, 3),
      burstAltitudeM: round(burstAltitude, 1),
      groundWindMs: round(groundWind, 2),
      region90Km2: regionArea === null ? null : round(regionArea / 1e6, 2),
      landing: {
        time: isoTime(time + landing.elapsed),
        elapsedS: round(landing.elapsed, 1),
        latitudeDeg: degrees(landing.latitude),
        longitudeDeg: degrees(landing.longitude),
        distanceM: round(reach.distance, 1),
        bearingDeg: bearingDegrees(reach.bearing),
        speedMs: round(landing.speed, 3),
        sunElevationDeg: round(sunElevation(landing, time + landing.elapsed) / DEGREE, 2),
      },
    },
  }
}

function checkAnswer({ limit, value, bound, margin }: LimitCheck) {
  const { scale, ...named } = LIMITS[limit]
  return {
    ...named,
    value: round(value * scale, 2),
    bound: round(bound * scale, 2),
    margin: round(margin * scale, 2),
    kept: margin >= 0,
  }
}

function cautionsOf(airs: readonly SurveyedAir[], haveMembers: boolean) {
  const cautions: Caution[] = [airspaceNotification]
  const isForecast = airs.some(({ sources }) => sources.some(({ kind }) => kind === 'field'))
  if (isForecast && haveMembers) cautions.push(membersAlongFlight)
  const oldest = isForecast ? 0 : Math.max(...airs.map(({ age }) => age ?? 0))
  if (airs.some(({ sources }) => sources.some(({ kind }) => kind === 'standard'))) {
    cautions.push({
      code: 'still-air',
      message:
        'Flown in the standard atmosphere without wind: heights and times are typical, the landing places mean nothing. Choose soundings.',
    })
  }
  if (oldest > FRESH_AIR) {
    cautions.push({
      code: 'air-of-another-time',
      message: `Some release times lie up to ${Math.round(oldest / 3600)} h from the time of their air: fly them again in newer air.`,
    })
  }
  return cautions.map(({ code, message }) => ({ code, message }))
}
