import { emptyAirState, type AirState, type VaryingAir } from './air.ts'
import {
  ascend,
  emptyAscentEnd,
  gasVolume,
  type AscendingBalloon,
  type AscentEnd,
} from './ascent.ts'
import { type Column } from './column.ts'
import { descend, emptyDescentEnd, type DescentEnd } from './descent.ts'
import { dragCurve, type DragChoice } from './dragCurves.ts'
import { wrapLongitude } from './earth.ts'
import { type FallingLoad } from './fallMotion.ts'
import { fill, type Fill } from './fill.ts'
import { sphereDiameter, sphereVolume, type Gas } from './gas.ts'
import { NotFlyable } from './notFlyable.ts'
import { dragArea, type Parachute } from './parachute.ts'
import { type PathRecorder, type Whereabouts } from './path.ts'
import { ascendAlongPath } from './varyingAscent.ts'
import { descendAlongPath } from './varyingDescent.ts'

/** Changes whenever the same plan in the same air would give another answer; stored with every run. */
export const MODEL_VERSION = '1.1'

/** Everything about a flight but the air. SI; angles in radians. */
export interface FlightPlan {
  launch: {
    latitude: number
    longitude: number
    /** Geometric m above mean sea level */
    altitude: number
    /** Seconds since 1970 UTC */
    time: number
  }
  balloon: {
    mass: number
    ratedBurstDiameter: number
    /** Share of the balloon's mass that stays on the line after burst, 0 to 1 */
    shareLeftOnLine: number
  }
  gas: Gas
  /** Pull at the neck of the filled balloon with nothing hung on it, kg */
  neckLift: number
  /** Everything hung below the neck: instruments, line, parachute; kg */
  payloadMass: number
  parachute: Parachute
  drag: DragChoice
  /** Geometric m above mean sea level */
  landingAltitude: number
}

/** A predicted flight. SI; angles in radians, longitudes in [-π, π). */
export interface Flight {
  fill: Fill
  ascent: {
    releaseRate: number
    meanRate: number
    duration: number
    lowestReynolds: number
    highestReynolds: number
  }
  burst: Whereabouts & { pressure: number; temperature: number; diameter: number }
  descent: { duration: number; peakSpeed: number; dragArea: number }
  landing: Whereabouts & { speed: number }
}

/** The ways through some air. Each moves the whereabouts along. */
interface Route {
  sample(at: Whereabouts, out: AirState): void
  ascend(balloon: AscendingBalloon, at: Whereabouts, end: AscentEnd): void
  descend(
    load: FallingLoad,
    burstRate: number,
    landingAltitude: number,
    at: Whereabouts,
    end: DescentEnd,
  ): void
}

/**
 * Flies a plan through one column of air: fill, ascent, burst, descent, landing.
 * @throws NotFlyable with the number that stands in the way.
 */
export function fly(plan: FlightPlan, column: Column, recorder?: PathRecorder): Flight {
  return flyRoute(plan, {
    sample(at, out) {
      column.air.sampleAltitude(at.altitude, out)
    },
    ascend(balloon, at, end) {
      ascend(balloon, column, at, end, recorder)
    },
    descend(load, burstRate, landingAltitude, at, end) {
      descend(load, burstRate, landingAltitude, column, at, end, recorder)
    },
  })
}

/**
 * Flies a plan through air that varies along the path, as `fly` does through one column, in steps of at
 * most `longestStep` m of altitude.
 * @throws NotFlyable with the number that stands in the way; and what the air throws where it ends.
 */
export function flyAlongPath(
  plan: FlightPlan,
  air: VaryingAir,
  recorder?: PathRecorder,
  longestStep = air.longestStep,
): Flight {
  const { time } = plan.launch
  return flyRoute(plan, {
    sample(at, out) {
      air.sample(at.latitude, at.longitude, at.altitude, time + at.elapsed, out)
    },
    ascend(balloon, at, end) {
      ascendAlongPath(balloon, air, time, longestStep, at, end, recorder)
    },
    descend(load, burstRate, landingAltitude, at, end) {
      descendAlongPath(load, burstRate, landingAltitude, air, time, longestStep, at, end, recorder)
    },
  })
}

function flyRoute(plan: FlightPlan, route: Route): Flight {
  const { balloon, gas, neckLift, payloadMass, launch, landingAltitude } = plan
  if (!(neckLift > payloadMass)) {
    throw new NotFlyable({ kind: 'no-free-lift', neckLift, payloadMass })
  }

  const at: Whereabouts = {
    latitude: launch.latitude,
    longitude: launch.longitude,
    altitude: launch.altitude,
    elapsed: 0,
  }
  const air = emptyAirState()
  route.sample(at, air)
  const filled = fill(neckLift, balloon.mass, payloadMass, gas, air)
  const ascending: AscendingBalloon = {
    fill: filled,
    mass: balloon.mass + payloadMass + filled.gasMass,
    temperatureOffset: gas.temperatureOffset,
    burstVolume: sphereVolume(balloon.ratedBurstDiameter),
    drag: dragCurve(plan.drag),
  }
  const releaseVolume = gasVolume(ascending, air.temperature, air.pressure)
  const fullestVolume = Math.max(filled.volume, releaseVolume)
  if (!(ascending.burstVolume > fullestVolume)) {
    throw new NotFlyable({
      kind: 'full-at-fill',
      ratedBurstDiameter: balloon.ratedBurstDiameter,
      fillDiameter: sphereDiameter(fullestVolume),
    })
  }

  const ascent = emptyAscentEnd()
  route.ascend(ascending, at, ascent)
  const burst = {
    latitude: at.latitude,
    longitude: wrapLongitude(at.longitude),
    altitude: at.altitude,
    elapsed: at.elapsed,
    pressure: 0,
    temperature: 0,
    diameter: balloon.ratedBurstDiameter,
  }
  if (!(burst.altitude > landingAltitude)) {
    throw new NotFlyable({
      kind: 'falls-past-landing',
      landingAltitude,
      burstAltitude: burst.altitude,
    })
  }
  route.sample(at, air)
  burst.pressure = air.pressure
  burst.temperature = air.temperature

  const fallingMass = payloadMass + balloon.shareLeftOnLine * balloon.mass
  const falling = { mass: fallingMass, dragArea: dragArea(plan.parachute, fallingMass) }
  const descent = emptyDescentEnd()
  route.descend(falling, ascent.burstRate, landingAltitude, at, descent)

  return {
    fill: filled,
    ascent: {
      releaseRate: ascent.releaseRate,
      meanRate: (burst.altitude - launch.altitude) / burst.elapsed,
      duration: burst.elapsed,
      lowestReynolds: ascent.lowestReynolds,
      highestReynolds: ascent.highestReynolds,
    },
    burst,
    descent: {
      duration: at.elapsed - burst.elapsed,
      peakSpeed: descent.peakSpeed,
      dragArea: falling.dragArea,
    },
    landing: {
      latitude: at.latitude,
      longitude: wrapLongitude(at.longitude),
      altitude: at.altitude,
      elapsed: at.elapsed,
      speed: descent.landingSpeed,
    },
  }
}
