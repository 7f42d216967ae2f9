import { emptyAirState, type Air } from '../../src/physics/air.ts'
import { gasVolume, riseRate, type AscendingBalloon } from '../../src/physics/ascent.ts'
import { dragCurve } from '../../src/physics/dragCurves.ts'
import { gravity } from '../../src/physics/earth.ts'
import { fill } from '../../src/physics/fill.ts'
import { type FlightPlan } from '../../src/physics/flight.ts'
import { sphereVolume } from '../../src/physics/gas.ts'
import { dragArea } from '../../src/physics/parachute.ts'

/** WGS 84, NIMA TR8350.2. */
const A = 6_378_137
const F = 1 / 298.257223563
const E2 = F * (2 - F)

/** Seconds a step. */
const STEP = 0.5

interface End {
  elapsed: number
  latitude: number
  longitude: number
  altitude: number
}

/**
 * The model's equations in time, by the classical Runge-Kutta method in half-second steps: slow, blind to
 * the air's kinks, and nothing in common with how the program flies but the air and the drag curve.
 */
export function referenceFieldFlight(plan: FlightPlan, air: Air): { burst: End; landing: End } {
  const state = emptyAirState()
  const { launch } = plan
  const sample = ([altitude, latitude, longitude]: number[], elapsed: number) => {
    air.sample(latitude, longitude, altitude, launch.time + elapsed, state)
  }
  const drifting = ([altitude, latitude]: number[]) => {
    const squash = 1 - E2 * Math.sin(latitude) ** 2
    const primeVertical = A / Math.sqrt(squash)
    const meridional = (A * (1 - E2)) / squash ** 1.5
    return [
      state.windNorth / (meridional + altitude),
      state.windEast / ((primeVertical + altitude) * Math.cos(latitude)),
    ]
  }

  let y = [launch.altitude, launch.latitude, launch.longitude]
  let t = 0
  sample(y, 0)
  const filled = fill(plan.neckLift, plan.balloon.mass, plan.payloadMass, plan.gas, state)
  const balloon: AscendingBalloon = {
    fill: filled,
    mass: plan.balloon.mass + plan.payloadMass + filled.gasMass,
    temperatureOffset: plan.gas.temperatureOffset,
    burstVolume: sphereVolume(plan.balloon.ratedBurstDiameter),
    drag: dragCurve(plan.drag),
  }
  const climb = (time: number, now: number[]) => {
    sample(now, time)
    return [riseRate(balloon, state, now[0]), ...drifting(now)]
  }
  const isFull = (time: number, now: number[]) => {
    sample(now, time)
    return gasVolume(balloon, state.temperature, state.pressure) >= balloon.burstVolume
  }
  ;[t, y] = until(climb, isFull, t, y)
  const burst = end(t, y)

  const mass = plan.payloadMass + plan.balloon.shareLeftOnLine * plan.balloon.mass
  const area = dragArea(plan.parachute, mass)
  y.push(climb(t, y)[0])
  const fall = (time: number, now: number[]) => {
    sample(now, time)
    const [altitude, , , w] = now
    const pull = -gravity(altitude) - (0.5 * state.density * area * w * Math.abs(w)) / mass
    return [w, ...drifting(now), pull]
  }
  ;[t, y] = until(fall, (_time, now) => now[0] <= plan.landingAltitude, t, y)
  return { burst, landing: end(t, y) }
}

type Derivative = (t: number, y: number[]) => number[]

/** Steps until something is so, and the last step only as far, to a microsecond. */
function until(
  f: Derivative,
  isSo: (t: number, y: number[]) => boolean,
  t: number,
  y: number[],
): [number, number[]] {
  for (;;) {
    const next = rungeKutta(f, t, y, STEP)
    if (isSo(t + STEP, next)) break
    t += STEP
    y = next
  }
  let low = 0
  let high = STEP
  while (high - low > 1e-6) {
    const middle = (low + high) / 2
    if (isSo(t + middle, rungeKutta(f, t, y, middle))) high = middle
    else low = middle
  }
  return [t + high, rungeKutta(f, t, y, high)]
}

function rungeKutta(f: Derivative, t: number, y: number[], h: number): number[] {
  const along = (k: number[], share: number) =>
    y.map((value, index) => value + share * h * k[index])
  const k1 = f(t, y)
  const k2 = f(t + h / 2, along(k1, 0.5))
  const k3 = f(t + h / 2, along(k2, 0.5))
  const k4 = f(t + h, along(k3, 1))
  return y.map(
    (value, index) => value + (h / 6) * (k1[index] + 2 * k2[index] + 2 * k3[index] + k4[index]),
  )
}

function end(elapsed: number, [altitude, latitude, longitude]: number[]): End {
  return { elapsed, altitude, latitude, longitude }
}
