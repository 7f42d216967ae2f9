import { emptyAirState, type AirState, type VaryingAir } from './air.ts'
import {
  bestNumber,
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
import { type PathRecorder, type Whereabouts } from './path.ts'
import { PathSampler, recordedStep, stepTowards } from './pathSampler.ts'

/** Share by which the volume at a step's top, foretold from its middle, may be too small. */
const FORETOLD_VOLUME = 0.05

/** Altitudes, m, apart at which the air above is looked at when a balloon stops rising. */
const LOOK_STEP = 400

/**
 * Near a jump of the drag crisis, where ln(Cd·Re²) is this close to it, a step goes at most this far, m,
 * and half the way to the jump; it crosses it in steps of a metre, in which any rate will do.
 */
const NEAR_JUMP = 0.3
const NEAR_JUMP_STEP = 100
const CROSSING_STEP = 1

const middle = emptyAirState()
const topAir = emptyAirState()

/**
 * Flies a balloon from `at`, released at `time` (s since 1970 UTC), up to its burst through air that
 * varies along the path. Moves `at` to the burst and fills `end`.
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
  end: AscentEnd,
  recorder?: PathRecorder,
): void {
  const path = new PathSampler(air, time, at)
  path.sampleHere(topAir)
  const releaseRate = riseRate(balloon, topAir, at.altitude)
  if (!(releaseRate > 0)) throw stopsRisingHere(balloon, path, at)
  recorder?.record(at, releaseRate, topAir.windEast, topAir.windNorth, 'ascent')
  let lowestReynolds = Infinity
  let highestReynolds = 0

  /** Seconds a metre and m/s at the start of a step: the end of the one before. */
  let startSlowness = 1 / releaseRate
  let startEast = topAir.windEast
  let startNorth = topAir.windNorth
  const hasJump = balloon.drag.jump !== null
  let startBest = hasJump ? bestAt(balloon, topAir, at.altitude) : 0
  const sampleFromStart = (altitude: number, out: AirState) => {
    const duration = (altitude - at.altitude) * startSlowness
    path.sampleAhead(altitude, duration, startEast * duration, startNorth * duration, out)
  }
  const volumeAt = (altitude: number) => {
    sampleFromStart(altitude, topAir)
    return gasVolume(balloon, topAir.temperature, topAir.pressure)
  }

  let burst = false
  while (!burst) {
    const bottom = at.altitude
    if (bottom >= CEILING) throw noBurst(balloon, volumeAt(CEILING))
    let top = Math.min(CEILING, stepTowards(bottom, air.breakAbove(bottom + 1), longestStep))
    if (recorder) {
      sampleFromStart(top, topAir)
      const range = Math.hypot(topAir.windEast - startEast, topAir.windNorth - startNorth)
      top = Math.min(top, bottom + recordedStep(range, 1 / startSlowness))
    }
    sampleFromStart((bottom + top) / 2, middle)
    const nearJump = stepNearJump(balloon, startBest, middle, bottom, top)
    if (nearJump < top - bottom) {
      top = bottom + nearJump
      sampleFromStart((bottom + top) / 2, middle)
    }
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
      topAir,
    )
    const endRate = riseRate(balloon, topAir, top)
    if (!(endRate > 0)) throw stopsRisingHere(balloon, path, at)
    const endSlowness = 1 / endRate
    path.move(
      top,
      (height / 6) * (startSlowness + 4 * slowness + endSlowness),
      (height / 6) * (startEast * startSlowness + 4 * east + topAir.windEast * endSlowness),
      (height / 6) * (startNorth * startSlowness + 4 * north + topAir.windNorth * endSlowness),
    )
    startSlowness = endSlowness
    startEast = topAir.windEast
    startNorth = topAir.windNorth
    if (hasJump) startBest = bestAt(balloon, topAir, top)
    recorder?.record(at, endRate, startEast, startNorth, burst ? 'burst' : 'ascent')
  }
  end.releaseRate = releaseRate
  end.burstRate = 1 / startSlowness
  end.lowestReynolds = lowestReynolds
  end.highestReynolds = highestReynolds
}

/** Cd·Re² of the steady ascent in given air at an altitude in m. */
function bestAt(balloon: AscendingBalloon, air: AirState, altitude: number): number {
  const volume = gasVolume(balloon, air.temperature, air.pressure)
  return bestNumber(balloon, air, volume, gravity(altitude))
}

/**
 * How far, m, a step from `bottom` may go towards `top` for the drag crisis' sake: as far as it likes
 * without a jump nearby. `startBest` is Cd·Re² at the bottom, `air` that of the middle.
 */
function stepNearJump(
  balloon: AscendingBalloon,
  startBest: number,
  air: AirState,
  bottom: number,
  top: number,
): number {
  const { jump } = balloon.drag
  if (jump === null) return Infinity
  const halfway = (top - bottom) / 2
  const start = Math.log(startBest / jump)
  const slope = (Math.log(bestAt(balloon, air, bottom + halfway) / jump) - start) / halfway
  const nearest = Math.min(Math.abs(start), Math.abs(start + slope * 2 * halfway))
  const crosses = start > 0 !== start + slope * 2 * halfway > 0
  if (!crosses && nearest > NEAR_JUMP) return Infinity
  const halfTheWay = Math.abs(start / slope) / 2
  return Math.max(CROSSING_STEP, Math.min(NEAR_JUMP_STEP, halfTheWay))
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
    path.sampleAhead(altitude, 0, 0, 0, topAir)
    const volumePerMole =
      (MOLAR_GAS_CONSTANT * (topAir.temperature + balloon.temperatureOffset)) / topAir.pressure
    leastDisplaced = Math.min(leastDisplaced, volumePerMole * topAir.density)
  }
  return stopsRising(balloon, at.altitude, leastDisplaced)
}
