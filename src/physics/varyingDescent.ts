import { emptyAirState, type VaryingAir } from './air.ts'
import { coast, OPENING_STEPS, type DescentEnd } from './descent.ts'
import { gravity } from './earth.ts'
import { FallMotion, type FallingLoad } from './fallMotion.ts'
import { type PathRecorder, type Whereabouts } from './path.ts'
import { PathSampler, recordedStep, stepTowards } from './pathSampler.ts'

/** Height, m, through which the free fall after burst is taken in steps of its own. */
const OPENING_HEIGHT = 600

const thirdAir = emptyAirState()
const endAir = emptyAirState()

/**
 * Brings a load down through air that varies along the path, as `descend` does in one column: from its
 * burst at `at`, where it still rises at `burstRate` m/s, to the landing altitude in m. `time` is the
 * release in s since 1970 UTC. Both stages of each step see the air where and when the load will be there;
 * no step crosses a kink of the air. Moves `at` to the landing and fills `end`.
 */
export function descendAlongPath(
  load: FallingLoad,
  burstRate: number,
  landingAltitude: number,
  air: VaryingAir,
  time: number,
  longestStep: number,
  at: Whereabouts,
  end: DescentEnd,
  recorder?: PathRecorder,
): void {
  const path = new PathSampler(air, time, at)
  path.sampleHere(endAir)
  coast(load, burstRate, endAir, at)
  const fall = new FallMotion()
  fall.begin(load)
  recorder?.record(at, 0, endAir.windEast, endAir.windNorth, 'descent')

  // √q starts from nothing, so the fall's beginning is stepped in σ = √s, in which the time is smooth. It
  // is short: the air of its two ends is enough, ln ρ and wind linear between them.
  const apex = at.altitude
  const lowest = Math.max(apex - OPENING_HEIGHT, air.breakBelow(apex - OPENING_HEIGHT / 3))
  const settled = Math.max(landingAltitude, lowest)
  const height = apex - settled
  const freeFall = Math.sqrt((2 * height) / gravity(apex))
  path.sampleAhead(
    settled,
    freeFall,
    endAir.windEast * freeFall,
    endAir.windNorth * freeFall,
    thirdAir,
  )
  const densityGrowth = Math.log(thirdAir.density / endAir.density)
  const density = (altitude: number) =>
    endAir.density * Math.exp((densityGrowth * (apex - altitude)) / height)
  const sigmaStep = Math.sqrt(height) / OPENING_STEPS
  for (let step = 1; step <= OPENING_STEPS; step++) {
    const to = step === OPENING_STEPS ? settled : apex - (step * sigmaStep) ** 2
    const third = (step - 2 / 3) * sigmaStep
    const thirdAltitude = apex - third * third
    const duration = fall.radau(
      sigmaStep,
      2 * third, // ds = 2σ·dσ
      gravity(thirdAltitude),
      density(thirdAltitude),
      2 * step * sigmaStep,
      gravity(to),
      density(to),
    )
    const share = (apex - (at.altitude + to) / 2) / height
    const east = endAir.windEast + (thirdAir.windEast - endAir.windEast) * share
    const north = endAir.windNorth + (thirdAir.windNorth - endAir.windNorth) * share
    path.move(to, duration, east * duration, north * duration)
    if (recorder) {
      const endShare = (apex - to) / height
      const endEast = endAir.windEast + (thirdAir.windEast - endAir.windEast) * endShare
      const endNorth = endAir.windNorth + (thirdAir.windNorth - endAir.windNorth) * endShare
      const phase = to > landingAltitude ? 'descent' : 'landing'
      recorder.record(at, -fall.speed, endEast, endNorth, phase)
    }
  }
  path.sampleHere(endAir)

  while (at.altitude > landingAltitude) {
    const from = at.altitude
    let to = Math.max(landingAltitude, stepTowards(from, air.breakBelow(from - 1), longestStep))
    if (recorder) {
      const { windEast, windNorth } = endAir
      const duration = (from - to) / fall.speed
      path.sampleAhead(to, duration, windEast * duration, windNorth * duration, thirdAir)
      const range = Math.hypot(thirdAir.windEast - windEast, thirdAir.windNorth - windNorth)
      to = Math.max(to, from - recordedStep(range, fall.speed))
    }
    const third = from - (from - to) / 3
    sampleStages(path, third, to, from - to, fall.speed)
    fall.radau(from - to, 1, gravity(third), thirdAir.density, 1, gravity(to), endAir.density)
    moveTo(path, to, fall)
    const phase = to > landingAltitude ? 'descent' : 'landing'
    recorder?.record(at, -fall.speed, endAir.windEast, endAir.windNorth, phase)
  }
  end.peakSpeed = Math.sqrt(fall.peakSquare)
  end.landingSpeed = fall.speed
}

/**
 * Samples both stages of a step of `height` m that starts at `speed` m/s. The way to the end is foretold
 * from twice the third's less the start's, which leaves the stages' weights, ¾ and ¼, of third order (the
 * conditions: Hairer, Nørsett and Wanner, Solving Ordinary Differential Equations I, II.1). A settled load's
 * speed goes with ρ^−½.
 */
function sampleStages(
  path: PathSampler,
  third: number,
  to: number,
  height: number,
  speed: number,
): void {
  const { windEast, windNorth, density } = endAir
  const slowness = 1 / speed
  const toThird = (height / 3) * slowness
  path.sampleAhead(third, toThird, windEast * toThird, windNorth * toThird, thirdAir)
  const thirdSlowness = slowness * Math.sqrt(thirdAir.density / density)
  path.sampleAhead(
    to,
    height * (2 * thirdSlowness - slowness),
    height * (2 * thirdAir.windEast * thirdSlowness - windEast * slowness),
    height * (2 * thirdAir.windNorth * thirdSlowness - windNorth * slowness),
    endAir,
  )
}

/** Drifts with the wind of each stage for the time that stage stands for. */
function moveTo(path: PathSampler, to: number, fall: FallMotion): void {
  const { firstDuration, lastDuration } = fall
  path.move(
    to,
    firstDuration + lastDuration,
    thirdAir.windEast * firstDuration + endAir.windEast * lastDuration,
    thirdAir.windNorth * firstDuration + endAir.windNorth * lastDuration,
  )
}
