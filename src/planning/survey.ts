import { emptyAirState } from '../physics/air.ts'
import { type Column } from '../physics/column.ts'
import { type Position } from '../physics/earth.ts'
import { fly, type FlightPlan } from '../physics/flight.ts'
import { disperse } from './dispersion.ts'
import { type Spread } from './spread.ts'
import { checkLimits, type LimitCheck, type WindowLimits } from './windows.ts'

/** Height above the site at which the wind of the fill is taken, m: that of a wind mast. WMO-No. 8. */
const MAST_HEIGHT = 10

/** What is asked of one release time. */
export interface Survey {
  plan: FlightPlan
  /** Members flown for the region of 90 %; 0 for none */
  members: number
  spread: Spread
  seed: number
  limits: WindowLimits
}

/** The figures of a flight at one release time, SI. */
export interface TimeFigures {
  releaseRate: number
  burstAltitude: number
  landing: Position & { elapsed: number; speed: number }
  /** Wind 10 m above the site in the air of the release, m/s */
  groundWind: number
  /** Smallest area that holds 90 % of the members, m²; null where none were flown */
  regionArea: number | null
}

/** A release time's figures and how it stands to the limits. */
export interface SurveyedTime {
  figures: TimeFigures
  checks: LimitCheck[]
}

/** Flies one release time in its air. @throws NotFlyable */
export function surveyTime(survey: Survey, column: Column): SurveyedTime {
  const figures = figuresOf(survey, column)
  return { figures, checks: checkLimits(figures, survey.plan.launch.time, survey.limits) }
}

function figuresOf(survey: Survey, column: Column): TimeFigures {
  const { plan, members, spread, seed } = survey
  const { ascent, burst, landing } = fly(plan, column)
  const air = emptyAirState()
  column.air.sampleAltitude(plan.launch.altitude + MAST_HEIGHT, air)
  const regions = members > 0 ? disperse(plan, column, spread, members, seed).landing.regions : []
  return {
    releaseRate: ascent.releaseRate,
    burstAltitude: burst.altitude,
    landing: {
      latitude: landing.latitude,
      longitude: landing.longitude,
      elapsed: landing.elapsed,
      speed: landing.speed,
    },
    groundWind: Math.hypot(air.windEast, air.windNorth),
    regionArea: regions.find(({ share }) => share === 0.9)?.area ?? null,
  }
}
