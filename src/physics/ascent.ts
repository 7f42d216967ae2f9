import { emptyAirState, type AirState } from './air.ts'
import { type Column } from './column.ts'
import { CEILING, MOLAR_GAS_CONSTANT } from './constants.ts'
import { type DragCurve } from './dragCurves.ts'
import { drift, gravity } from './earth.ts'
import { type Fill } from './fill.ts'
import { sphereDiameter } from './gas.ts'
import { NotFlyable } from './notFlyable.ts'
import { recordedStep, type PathRecorder, type Whereabouts } from './path.ts'

/** A balloon on its way up, SI. */
export interface AscendingBalloon {
  fill: Fill
  /** Balloon, payload and gas, kg */
  mass: number
  /** Gas warmer than the air by, K */
  temperatureOffset: number
  /** Volume at which the envelope bursts, m³ */
  burstVolume: number
  drag: DragCurve
}

/** How an ascent ended, SI. The whereabouts passed in stand at the burst. */
export interface AscentEnd {
  /** Rate of ascent at release, m/s */
  releaseRate: number
  /** Rate of ascent at burst, m/s */
  burstRate: number
  lowestReynolds: number
  highestReynolds: number
}

/** Gas volume in m³ in air of a temperature in K and a pressure in Pa. */
export function gasVolume(
  balloon: AscendingBalloon,
  temperature: number,
  pressure: number,
): number {
  return (
    (balloon.fill.moles * MOLAR_GAS_CONSTANT * (temperature + balloon.temperatureOffset)) / pressure // ideal gas law
  )
}

/** Reynolds number at which a balloon rises steadily in this air; 0 where it has no lift. */
export function risingReynolds(
  balloon: AscendingBalloon,
  air: AirState,
  volume: number,
  gravity: number,
): number {
  const lift = (air.density * volume - balloon.mass) * gravity
  if (!(lift > 0)) return 0
  // ½·ρ·Cd·(πD²/4)·w² = F with w = Re·μ/(ρD) leaves Cd·Re² = 8·F·ρ/(π·μ²).
  return balloon.drag.reynolds((8 * lift * air.density) / (Math.PI * air.viscosity * air.viscosity))
}

/** Speed in m/s of a sphere of `volume` m³ at a Reynolds number. */
export function speed(reynolds: number, air: AirState, volume: number): number {
  return (reynolds * air.viscosity) / (air.density * sphereDiameter(volume)) // Re = ρwD/μ
}

/** Steady rate of ascent in m/s at an altitude in m of given air. */
export function riseRate(balloon: AscendingBalloon, air: AirState, altitude: number): number {
  const volume = gasVolume(balloon, air.temperature, air.pressure)
  return speed(risingReynolds(balloon, air, volume, gravity(altitude)), air, volume)
}

const slabAir = emptyAirState()
const pointAir = emptyAirState()

/**
 * Flies a balloon from `at` up to its burst, quasi-steadily: in one column the ascent is the quadrature
 * dt = dz/w(z) with drift wind·dt. Moves `at` to the burst.
 * @throws NotFlyable where it stops rising or has not burst at the ceiling.
 */
export function ascend(
  balloon: AscendingBalloon,
  column: Column,
  at: Whereabouts,
  recorder?: PathRecorder,
): AscentEnd {
  const { air } = column
  let lowestReynolds = Infinity
  let highestReynolds = 0
  air.sampleAltitude(at.altitude, pointAir)
  const releaseRate = riseRate(balloon, pointAir, at.altitude)
  recorder?.record(at, releaseRate, 'ascent')

  let slab = column.slabAt(at.altitude)
  let previousRate = releaseRate
  let burst = false
  while (!burst) {
    if (slab >= column.count) throw noBurst(balloon, volumeAt(balloon, column, CEILING))
    const bottom = at.altitude
    let top = column.altitude(slab + 1)
    if (recorder) top = Math.min(top, bottom + recordedStep(column.windRange[slab], previousRate))
    if (reachesBurst(balloon, column, slab, top)) {
      const volume = (altitude: number) => volumeAt(balloon, column, altitude)
      top = burstAltitude(balloon.burstVolume, volume, bottom, top)
      burst = true
    }
    if (top > bottom) {
      column.mean(bottom, top, slabAir)
      const volume = gasVolume(balloon, slabAir.temperature, slabAir.pressure)
      const reynolds = risingReynolds(balloon, slabAir, volume, gravity((bottom + top) / 2))
      if (reynolds === 0)
        throw stopsRising(balloon, bottom, leastDisplaced(balloon, column, bottom))
      if (reynolds < lowestReynolds) lowestReynolds = reynolds
      if (reynolds > highestReynolds) highestReynolds = reynolds
      previousRate = speed(reynolds, slabAir, volume)
      const duration = (top - bottom) / previousRate
      drift(at, (bottom + top) / 2, slabAir.windEast * duration, slabAir.windNorth * duration)
      at.elapsed += duration
      at.altitude = top
    }
    if (recorder && !burst) {
      air.sampleAltitude(top, pointAir)
      recorder.record(at, riseRate(balloon, pointAir, top), 'ascent')
    }
    if (top === column.altitude(slab + 1)) slab++
  }

  air.sampleAltitude(at.altitude, pointAir)
  const burstRate = riseRate(balloon, pointAir, at.altitude)
  if (!(burstRate > 0)) {
    throw stopsRising(balloon, at.altitude, leastDisplaced(balloon, column, at.altitude))
  }
  recorder?.record(at, burstRate, 'burst')
  return { releaseRate, burstRate, lowestReynolds, highestReynolds }
}

function reachesBurst(
  balloon: AscendingBalloon,
  column: Column,
  slab: number,
  top: number,
): boolean {
  if (top !== column.altitude(slab + 1))
    return volumeAt(balloon, column, top) >= balloon.burstVolume
  const volume = gasVolume(balloon, column.edgeTemperature[slab + 1], column.edgePressure[slab + 1])
  return volume >= balloon.burstVolume
}

function volumeAt(balloon: AscendingBalloon, column: Column, altitude: number): number {
  column.air.sampleAltitude(altitude, pointAir)
  return gasVolume(balloon, pointAir.temperature, pointAir.pressure)
}

/**
 * The altitude in (bottom, top] m where the gas, whose volume in m³ at an altitude `volumeAt` tells, fills
 * the burst volume, to a tenth of a millimetre.
 */
export function burstAltitude(
  burstVolume: number,
  volumeAt: (altitude: number) => number,
  bottom: number,
  top: number,
): number {
  // False position with the Illinois weight on ln V, which is nearly a straight line in altitude.
  const excess = (altitude: number) => Math.log(volumeAt(altitude) / burstVolume)
  let low = bottom
  let high = top
  let excessLow = excess(low)
  let excessHigh = excess(high)
  if (excessLow >= 0) return low
  let side = 0
  for (let round = 0; round < 60 && high - low > 1e-4; round++) {
    const middle = high - (excessHigh * (high - low)) / (excessHigh - excessLow)
    const excessMiddle = excess(middle)
    if (Math.abs(excessMiddle) < 1e-9) return middle // 1e-9 of the volume is under 0.01 mm of altitude
    if (excessMiddle > 0) {
      high = middle
      excessHigh = excessMiddle
      if (side === 1) excessLow /= 2
      side = 1
    } else {
      low = middle
      excessLow = excessMiddle
      if (side === -1) excessHigh /= 2
      side = -1
    }
  }
  return high
}

/** `ceilingVolume`: what the gas has grown to at the ceiling, m³. */
export function noBurst(balloon: AscendingBalloon, ceilingVolume: number): NotFlyable {
  return new NotFlyable({
    kind: 'no-burst',
    ratedBurstDiameter: sphereDiameter(balloon.burstVolume),
    ceiling: CEILING,
    ceilingDiameter: sphereDiameter(ceilingVolume),
  })
}

/** The least mass of air in kg, from an altitude up, that a mole of the gas displaces. */
function leastDisplaced(balloon: AscendingBalloon, column: Column, altitude: number): number {
  let least = Infinity
  for (let edge = column.slabAt(altitude); edge <= column.count; edge++) {
    const volumePerMole =
      (MOLAR_GAS_CONSTANT * (column.edgeTemperature[edge] + balloon.temperatureOffset)) /
      column.edgePressure[edge]
    least = Math.min(least, volumePerMole * column.edgeDensity[edge])
  }
  return least
}

/** `leastDisplaced`: the least mass of air in kg that a mole of the gas displaces further up. */
export function stopsRising(
  balloon: AscendingBalloon,
  altitude: number,
  leastDisplaced: number,
): NotFlyable {
  // Where a mole of gas displaces least, the gas must still carry all.
  const { moles, gasMass, grossLift, neckLift } = balloon.fill
  const liftPerMole = leastDisplaced - gasMass / moles
  const neededMoles = (balloon.mass - gasMass) / liftPerMole
  return new NotFlyable({
    kind: 'stops-rising',
    altitude,
    neckLift,
    // Gross lift goes with the gas; the balloon's own mass comes off it.
    neededNeckLift:
      liftPerMole > 0 ? (grossLift * neededMoles) / moles - (grossLift - neckLift) : null,
  })
}
