import { Solver } from 'odex'
import { emptyAirState, type ColumnAir } from '../../src/physics/air.ts'
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

export interface ReferenceEnd {
  elapsed: number
  latitude: number
  longitude: number
  altitude: number
}

/**
 * The model's equations as they stand in the documents, integrated by a general-purpose solver
 * (odex: Hairer and Wanner's ODEX) from break to break of the air at a tolerance of 1e-10: slow, and
 * nothing in common with how the program flies but the air and the drag curve.
 */
export function referenceFlight(
  plan: FlightPlan,
  air: ColumnAir,
): { burst: ReferenceEnd; landing: ReferenceEnd } {
  const state = emptyAirState()
  air.sampleAltitude(plan.launch.altitude, state)
  const filled = fill(plan.neckLift, plan.balloon.mass, plan.payloadMass, plan.gas, state)
  const balloon: AscendingBalloon = {
    fill: filled,
    mass: plan.balloon.mass + plan.payloadMass + filled.gasMass,
    temperatureOffset: plan.gas.temperatureOffset,
    burstVolume: sphereVolume(plan.balloon.ratedBurstDiameter),
    drag: dragCurve(plan.drag),
  }
  const burstAltitude = bisect(plan.launch.altitude, 50_000, (altitude) => {
    air.sampleAltitude(altitude, state)
    return gasVolume(balloon, state.temperature, state.pressure) < balloon.burstVolume
  })

  // Ascent: dt/dz = 1/w, dφ/dz = v/(w·(M+z)), dλ/dz = u/(w·(N+z)·cos φ)
  let y = [0, plan.launch.latitude, plan.launch.longitude]
  const climb = (z: number, [, latitude]: number[]) => {
    air.sampleAltitude(z, state)
    const w = riseRate(balloon, state, z)
    return [1 / w, ...turn(latitude, z, state.windEast, state.windNorth).map((rate) => rate / w)]
  }
  y = piecewise(climb, plan.launch.altitude, burstAltitude, y, air)
  const burst = end(y, burstAltitude)
  air.sampleAltitude(burstAltitude, state)
  const rate = riseRate(balloon, state, burstAltitude)

  // Descent: m·dw/dt = −m·g − ½·ρ·Cd·A·w·|w|, first in time through the turn at the top …
  const mass = plan.payloadMass + plan.balloon.shareLeftOnLine * plan.balloon.mass
  const area = dragArea(plan.parachute, mass)
  const acceleration = (z: number, w: number) =>
    -gravity(z) - (0.5 * state.density * area * w * Math.abs(w)) / mass
  const fall = (_t: number, [z, w, latitude]: number[]) => {
    air.sampleAltitude(z, state)
    return [w, acceleration(z, w), ...turn(latitude, z, state.windEast, state.windNorth)]
  }
  const turning = 3
  const top = solve(fall, 0, turning, [burstAltitude, rate, burst.latitude, burst.longitude])
  // … then in altitude.
  const sink = (altitude: number, [, speed, north]: number[]) => {
    air.sampleAltitude(altitude, state)
    const turned = turn(north, altitude, state.windEast, state.windNorth)
    return [1 / speed, acceleration(altitude, speed) / speed, ...turned.map((v) => v / speed)]
  }
  const [elapsed, , latitude, longitude] = piecewise(
    sink,
    top[0],
    plan.landingAltitude,
    [burst.elapsed + turning, ...top.slice(1)],
    air,
  )
  return { burst, landing: end([elapsed, latitude, longitude], plan.landingAltitude) }
}

type Derivative = (x: number, y: number[]) => number[]

function turn(latitude: number, z: number, east: number, north: number): [number, number] {
  const squash = 1 - E2 * Math.sin(latitude) ** 2
  const primeVertical = A / Math.sqrt(squash)
  const meridional = (A * (1 - E2)) / squash ** 1.5
  return [north / (meridional + z), east / ((primeVertical + z) * Math.cos(latitude))]
}

function piecewise(f: Derivative, from: number, to: number, y: number[], air: ColumnAir): number[] {
  const [low, high] = [Math.min(from, to), Math.max(from, to)]
  const stops = [...air.breakAltitudes].filter((stop) => stop > low + 1e-6 && stop < high - 1e-6)
  if (to < from) stops.reverse()
  let x = from
  for (const stop of [...stops, to]) {
    y = solve(f, x, stop, y)
    x = stop
  }
  return y
}

function solve(f: Derivative, from: number, to: number, y: number[]): number[] {
  const solver = new Solver(y.length)
  solver.absoluteTolerance = solver.relativeTolerance = 1e-10
  solver.maxSteps = 1_000_000
  solver.initialStepSize = Math.min(1, Math.abs(to - from) / 10)
  const solution = solver.solve(f, from, y, to)
  if (solution.outcome !== 0) throw new Error(`the reference solver gave up: ${solution.outcome}`)
  return solution.y
}

function bisect(low: number, high: number, isBelow: (x: number) => boolean): number {
  while (high - low > 1e-7) {
    const middle = (low + high) / 2
    if (isBelow(middle)) low = middle
    else high = middle
  }
  return (low + high) / 2
}

function end([elapsed, latitude, longitude]: number[], altitude: number): ReferenceEnd {
  return { elapsed, latitude, longitude, altitude }
}
