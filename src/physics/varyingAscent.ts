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
 * varies along the path. The midpoint rule in altitude: each step sees the air at its middle, where and
 * when the balloon will be there; no step crosses a kink of the air. Moves `at` to the burst.
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
  let lowestReynolds = Infinity
  let highestReynolds = 0
  path.sampleHere(end)
  const releaseRate = riseRate(balloon, end, at.altitude)
  if (!(releaseRate > 0)) throw stopsRisingHere(balloon, path, at)
  recorder?.record(at, releaseRate, 'ascent')

  let rate = releaseRate
  let windEast = end.windEast
  let windNorth = end.windNorth
  /** Samples the air where the balloon will be at an altitude. */
  const sampleAt = (altitude: number, out: AirState) => {
    path.sampleAhead(altitude, (altitude - at.altitude) / rate, windEast, windNorth, out)
  }
  const volumeAt = (altitude: number) => {
    sampleAt(altitude, end)
    return gasVolume(balloon, end.temperature, end.pressure)
  }

  let burst = false
  while (!burst) {
    const bottom = at.altitude
    if (bottom >= CEILING) throw noBurst(balloon, volumeAt(CEILING))
    let top = Math.min(CEILING, stepTowards(bottom, air.breakAbove(bottom + 1), longestStep))
    if (recorder) {
      const range = path.windRange(end, () => {
        sampleAt(top, end)
      })
      top = Math.min(top, bottom + recordedStep(range, rate))
    }
    sampleAt((bottom + top) / 2, middle)
    if (foretoldVolume(balloon, middle, top - bottom) >= balloon.burstVolume) {
      if (volumeAt(top) >= balloon.burstVolume) {
        top = burstAltitude(balloon.burstVolume, volumeAt, bottom, top)
        burst = true
        sampleAt((bottom + top) / 2, middle)
      }
    }
    const volume = gasVolume(balloon, middle.temperature, middle.pressure)
    const reynolds = risingReynolds(balloon, middle, volume, gravity((bottom + top) / 2))
    if (reynolds === 0) throw stopsRisingHere(balloon, path, at)
    if (reynolds < lowestReynolds) lowestReynolds = reynolds
    if (reynolds > highestReynolds) highestReynolds = reynolds
    rate = speed(reynolds, middle, volume)
    windEast = middle.windEast
    windNorth = middle.windNorth
    const duration = (top - bottom) / rate
    path.move(top, duration, windEast * duration, windNorth * duration)
    if (recorder && !burst) {
      path.sampleHere(end)
      recorder.record(at, riseRate(balloon, end, top), 'ascent')
    }
  }

  path.sampleHere(end)
  const burstRate = riseRate(balloon, end, at.altitude)
  if (!(burstRate > 0)) throw stopsRisingHere(balloon, path, at)
  recorder?.record(at, burstRate, 'burst')
  return { releaseRate, burstRate, lowestReynolds, highestReynolds }
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
