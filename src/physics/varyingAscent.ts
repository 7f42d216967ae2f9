import { emptyAirState, type AirState, type VaryingAir } from './air.ts'
import {
  burstAltitude,
  gasVolume,
  noBurst,
  riseRate,
  risingReynolds,
  speed,
  stopsRising,
  type AscendingBalloon,
  type AscentEnd,
} from './ascent.ts'
import { CEILING, MOLAR_GAS_CONSTANT, STANDARD_GRAVITY } from './constants.ts'
import { gravity } from './earth.ts'
import { recordedStep, type PathRecorder, type Whereabouts } from './path.ts'
import { PathSampler, stepTowards } from './pathSampler.ts'

/** Share by which the volume at a step's top, foretold from its middle, may be too small. */
const FORETOLD_VOLUME = 0.05

/** Altitudes, m, apart at which the air above is looked at when a balloon stops rising. */
const LOOK_STEP = 400

const middle = emptyAirState()
const end = emptyAirState()

/**
 * Flies a balloon from `at`, released at `time` (s since 1970 UTC), up to its burst through air that
 * varies along the path. Moves `at` to the burst.
 *
 * dt/dz = 1/w and dx/dz = wind/w in steps that cross no kink of the air, with stages at the start, the
 * middle and the end, each where and when the balloon will be there, in Simpson's weights. The way to the
 * end is foretold with 1½ of the middle's velocity less ½ of the start's, and that stage serves as the
 * next step's start. By Taylor's series its place is then ¼·h²·f′ too far, which gives the next step back
 * the h³·f_y·f′/24 that these weights fall short of third order (the conditions: Hairer, Nørsett and
 * Wanner, Solving Ordinary Differential Equations I, II.1): third order at two samples a step.
 * @throws NotFlyable where it stops rising or has not burst at the ceiling.
 */
export function ascendAlongPath(
  balloon: AscendingBalloon,
  air: VaryingAir,
  time: number,
  longestStep: number,
  at: Whereabouts,
  recorder?: PathRecorder,
): AscentEnd {
  const path = new PathSampler(air, time, at)
  path.sampleHere(end)
  const releaseRate = riseRate(balloon, end, at.altitude)
  if (!(releaseRate > 0)) throw stopsRisingHere(balloon, path, at)
  recorder?.record(at, releaseRate, 'ascent')
  let lowestReynolds = Infinity
  let highestReynolds = 0

  /** Seconds a metre and m/s at the start of a step: the end of the one before. */
  let startSlowness = 1 / releaseRate
  let startEast = end.windEast
  let startNorth = end.windNorth
  const sampleFromStart = (altitude: number, out: AirState) => {
    const duration = (altitude - at.altitude) * startSlowness
    path.sampleAhead(altitude, duration, startEast * duration, startNorth * duration, out)
  }
  const volumeAt = (altitude: number) => {
    sampleFromStart(altitude, end)
    return gasVolume(balloon, end.temperature, end.pressure)
  }

  let burst = false
  while (!burst) {
    const bottom = at.altitude
    if (bottom >= CEILING) throw noBurst(balloon, volumeAt(CEILING))
    let top = Math.min(CEILING, stepTowards(bottom, air.breakAbove(bottom + 1), longestStep))
    if (recorder) {
      sampleFromStart(top, end)
      const range = Math.hypot(end.windEast - startEast, end.windNorth - startNorth)
      top = Math.min(top, bottom + recordedStep(range, 1 / startSlowness))
    }
    sampleFromStart((bottom + top) / 2, middle)
    if (foretoldVolume(balloon, middle, top - bottom) >= balloon.burstVolume) {
      if (volumeAt(top) >= balloon.burstVolume) {
        top = burstAltitude(balloon.burstVolume, volumeAt, bottom, top)
        burst = true
        sampleFromStart((bottom + top) / 2, middle)
      }
    }
    const height = top - bottom
    const volume = gasVolume(balloon, middle.temperature, middle.pressure)
    const reynolds = risingReynolds(balloon, middle, volume, gravity((bottom + top) / 2))
    if (reynolds === 0) throw stopsRisingHere(balloon, path, at)
    if (reynolds < lowestReynolds) lowestReynolds = reynolds
    if (reynolds > highestReynolds) highestReynolds = reynolds
    const slowness = 1 / speed(reynolds, middle, volume)
    const east = middle.windEast * slowness
    const north = middle.windNorth * slowness
    path.sampleAhead(
      top,
      height * (1.5 * slowness - 0.5 * startSlowness),
      height * (1.5 * east - 0.5 * startEast * startSlowness),
      height * (1.5 * north - 0.5 * startNorth * startSlowness),
      end,
    )
    const endRate = riseRate(balloon, end, top)
    if (!(endRate > 0)) throw stopsRisingHere(balloon, path, at)
    const endSlowness = 1 / endRate
    path.move(
      top,
      (height / 6) * (startSlowness + 4 * slowness + endSlowness),
      (height / 6) * (startEast * startSlowness + 4 * east + end.windEast * endSlowness),
      (height / 6) * (startNorth * startSlowness + 4 * north + end.windNorth * endSlowness),
    )
    startSlowness = endSlowness
    startEast = end.windEast
    startNorth = end.windNorth
    recorder?.record(at, endRate, burst ? 'burst' : 'ascent')
  }
  return { releaseRate, burstRate: 1 / startSlowness, lowestReynolds, highestReynolds }
}

/** The most that the gas may fill, m³, at the top of a step of `height` m with this air at its middle. */
function foretoldVolume(balloon: AscendingBalloon, air: AirState, height: number): number {
  const scaleHeight = air.pressure / (air.density * STANDARD_GRAVITY)
  const growth = Math.exp(height / 2 / scaleHeight) * (1 + FORETOLD_VOLUME)
  return gasVolume(balloon, air.temperature, air.pressure) * growth
}

/** What would keep the balloon rising, judged by the air straight above it now. */
function stopsRisingHere(balloon: AscendingBalloon, path: PathSampler, at: Whereabouts) {
  // Per mole the displaced air weighs R·(T+ΔT)·ρ/p; where that is least, the gas must still carry all.
  let leastDisplaced = Infinity
  for (let altitude = at.altitude; altitude <= CEILING; altitude += LOOK_STEP) {
    path.sampleAhead(altitude, 0, 0, 0, end)
    const volumePerMole =
      (MOLAR_GAS_CONSTANT * (end.temperature + balloon.temperatureOffset)) / end.pressure
    leastDisplaced = Math.min(leastDisplaced, volumePerMole * end.density)
  }
  return stopsRising(balloon, at.altitude, leastDisplaced)
}
