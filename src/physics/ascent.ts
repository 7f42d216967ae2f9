import { emptyAirState, type AirState } from './air.ts'
import { type Column, type WindDeparture } from './column.ts'
import { CEILING, MOLAR_GAS_CONSTANT } from './constants.ts'
import { type DragCurve } from './dragCurves.ts'
import { drift, driftAlong, gravity } from './earth.ts'
import { type Fill } from './fill.ts'
import { sphereDiameter } from './gas.ts'
import { NotFlyable } from './notFlyable.ts'
import { recordStep, type PathRecorder, type Phase, type Whereabouts } from './path.ts'

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
  /** Factor on the drag curve's coefficient; 1 unless given */
  dragFactor?: number
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

export function emptyAscentEnd(): AscentEnd {
  return { releaseRate: 0, burstRate: 0, lowestReynolds: 0, highestReynolds: 0 }
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
  const best = bestNumber(balloon, air, volume, gravity)
  return best > 0 ? balloon.drag.reynolds(best) : 0
}

/** Cd·Re² of a balloon that rises steadily in this air; negative or nothing where it has no lift. */
export function bestNumber(
  balloon: AscendingBalloon,
  air: AirState,
  volume: number,
  gravity: number,
): number {
  const lift = (air.density * volume - balloon.mass) * gravity
  // ½·ρ·Cd·(πD²/4)·w² = F with w = Re·μ/(ρD) leaves Cd·Re² = 8·F·ρ/(π·μ²).
  const best = (8 * lift * air.density) / (Math.PI * air.viscosity * air.viscosity)
  return best / (balloon.dragFactor ?? 1)
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
 * dt = dz/w(z) with drift wind·dt. Moves `at` to the burst and fills `end`; allocates nothing without a
 * recorder.
 * @throws NotFlyable where it stops rising or has not burst at the ceiling.
 */
export function ascend(
  balloon: AscendingBalloon,
  column: Column,
  at: Whereabouts,
  end: AscentEnd,
  recorder?: PathRecorder,
  departure?: WindDeparture,
): void {
  rise.begin(balloon, column, at, departure)
  end.releaseRate = rise.rateHere()
  recorder?.record(at, end.releaseRate, pointAir.windEast, pointAir.windNorth, 'ascent')

  const { edgeVolumePerMole } = column.rise(balloon.temperatureOffset)
  const burstVolumePerMole = balloon.burstVolume / balloon.fill.moles
  const { count } = column
  const slab = column.slabAt(at.altitude)
  let burstSlab = slab
  while (burstSlab < count && edgeVolumePerMole[burstSlab + 1] < burstVolumePerMole) burstSlab++

  if (slab < burstSlab) {
    const top = column.altitude(slab + 1)
    if (recorder) rise.recordedStep(slab, top, recorder, 'ascent')
    else rise.through(slab, top)
    rise.wholeSlabs(slab + 1, burstSlab, recorder)
  }
  const volume = (altitude: number) => volumeAt(balloon, column, altitude)
  if (burstSlab === count) throw noBurst(balloon, volume(CEILING))

  const burstTop = column.altitude(burstSlab + 1)
  const burst = burstAltitude(balloon.burstVolume, volume, at.altitude, burstTop)
  if (recorder) rise.recordedStep(burstSlab, burst, recorder, 'burst')
  else if (burst > at.altitude) rise.through(burstSlab, burst)
  end.burstRate = rise.rateHere()
  if (!(end.burstRate > 0)) throw stopsRisingIn(column, balloon, at.altitude)
  end.lowestReynolds = rise.lowestReynolds
  end.highestReynolds = rise.highestReynolds
}

/** Series over the slabs of a column, kept for the next ascent. */
let best = new Float64Array(0)
let reynolds = new Float64Array(0)
let durations = new Float64Array(0)
let drifts = { altitude: best, east: best, north: best }

/** How near ln(Cd·Re²) is to its jump where the steps become short: some two slabs on either side. */
const NEAR_JUMP = 0.1
/** Parts that a slab near the jump is taken in, and steps on each side of the jump in such a part. */
const CRISIS_PARTS = 16
const JUMP_STEPS = 4

/** The state of a rising balloon, stepped up through a column. */
class Rise {
  lowestReynolds = Infinity
  highestReynolds = 0
  private balloon!: AscendingBalloon
  private column!: Column
  private at!: Whereabouts
  private departure: WindDeparture | undefined
  /** Where it was asked for last, m/s */
  private rate = 0

  begin(
    balloon: AscendingBalloon,
    column: Column,
    at: Whereabouts,
    departure: WindDeparture | undefined,
  ): void {
    this.lowestReynolds = Infinity
    this.highestReynolds = 0
    this.balloon = balloon
    this.column = column
    this.at = at
    this.departure = departure
    if (best.length < column.count) {
      best = new Float64Array(column.count)
      reynolds = new Float64Array(column.count)
      durations = new Float64Array(column.count)
      drifts = {
        altitude: new Float64Array(column.count),
        east: new Float64Array(column.count),
        north: new Float64Array(column.count),
      }
    }
  }

  /** Steady rate of ascent here, m/s. */
  rateHere(): number {
    this.column.at(this.at.altitude, pointAir)
    this.rate = riseRate(this.balloon, pointAir, this.at.altitude)
    return this.rate
  }

  /** Up to `top` m within one slab: in one step, or in many where the drag crisis is near. */
  through(slab: number, top: number): void {
    const bottom = this.at.altitude
    if (!this.isNearJump(bottom) && !this.isNearJump(top)) {
      this.step(slab, top)
      return
    }
    for (let part = 1; part <= CRISIS_PARTS; part++) {
      this.throughCrisis(slab, bottom + ((top - bottom) * part) / CRISIS_PARTS)
    }
  }

  /** As `through`, in steps that meet where the Reynolds number jumps. */
  private throughCrisis(slab: number, top: number): void {
    const bottom = this.at.altitude
    const jump = this.jumpIn(bottom, top)
    if (jump === null) {
      this.step(slab, top)
      return
    }
    // Next to the jump the rate changes as the root of the distance to it, so the steps grow from it.
    for (let step = JUMP_STEPS - 1; step >= 0; step--) {
      this.step(slab, jump - (jump - bottom) * (step / JUMP_STEPS) ** 2)
    }
    for (let step = 1; step <= JUMP_STEPS; step++) {
      this.step(slab, jump + (top - jump) * (step / JUMP_STEPS) ** 2)
    }
  }

  private isNearJump(altitude: number): boolean {
    const { jump } = this.balloon.drag
    return jump !== null && Math.abs(Math.log(this.bestAt(altitude) / jump)) < NEAR_JUMP
  }

  /** The altitude in (bottom, top) m at which the Reynolds number jumps; null where it does not. */
  private jumpIn(bottom: number, top: number): number | null {
    const { jump } = this.balloon.drag
    if (jump === null || this.bestAt(bottom) > jump === this.bestAt(top) > jump) return null
    const rises = this.bestAt(top) > jump
    let [low, high] = [bottom, top]
    while (high - low > 1e-3) {
      const middle = (low + high) / 2
      if (this.bestAt(middle) > jump === rises) high = middle
      else low = middle
    }
    return low
  }

  private bestAt(altitude: number): number {
    const { balloon, column } = this
    column.at(altitude, pointAir)
    const volume = gasVolume(balloon, pointAir.temperature, pointAir.pressure)
    return bestNumber(balloon, pointAir, volume, gravity(altitude))
  }

  /** Up to `top` m within one slab, in the mean air of the step. */
  private step(slab: number, top: number): void {
    const { balloon, column, at, departure } = this
    const bottom = at.altitude
    const middle = (bottom + top) / 2
    column.mean(bottom, top, slabAir)
    const volume = gasVolume(balloon, slabAir.temperature, slabAir.pressure)
    const reynoldsHere = risingReynolds(balloon, slabAir, volume, gravity(middle))
    if (reynoldsHere === 0) throw stopsRisingIn(column, balloon, bottom)
    if (reynoldsHere < this.lowestReynolds) this.lowestReynolds = reynoldsHere
    if (reynoldsHere > this.highestReynolds) this.highestReynolds = reynoldsHere
    const rate = speed(reynoldsHere, slabAir, volume)
    const duration = (top - bottom) / rate
    const east = slabAir.windEast + (departure ? departure.east[slab] : 0)
    const north = slabAir.windNorth + (departure ? departure.north[slab] : 0)
    drift(at, middle, east * duration, north * duration)
    at.elapsed += duration
    at.altitude = top
  }

  /** As `through`, telling a recorder of the way; the step ends in `phase`. */
  recordedStep(slab: number, top: number, recorder: PathRecorder, phase: Phase): void {
    const { at, column } = this
    const from = { ...at }
    const fromRate = this.rate
    this.through(slab, top)
    recordStep(recorder, column, from, fromRate, at, this.rateHere(), phase)
  }

  /** Through slabs [first, end), all of each: the same as `through` each, from the tables where it can. */
  wholeSlabs(first: number, end: number, recorder?: PathRecorder): void {
    const { balloon, column, at, departure } = this
    if (balloon.drag.jump !== null) {
      for (let slab = first; slab < end; slab++) {
        const top = column.altitude(slab + 1)
        if (recorder) this.recordedStep(slab, top, recorder, 'ascent')
        else this.through(slab, top)
      }
      return
    }
    const { fill, mass, dragFactor = 1 } = balloon
    const { displacedPerMole, bestPerLift, slowness } = column.rise(balloon.temperatureOffset)
    const { windEast, windNorth } = column
    for (let slab = first; slab < end; slab++) {
      const lift = fill.moles * displacedPerMole[slab] - mass
      if (!(lift > 0)) throw stopsRisingIn(column, balloon, column.altitude(slab))
      best[slab] = (lift * bestPerLift[slab]) / dragFactor
    }
    balloon.drag.reynoldsOfAll(best, reynolds, first, end)

    const { altitude, east, north } = drifts
    const cubeRootMoles = Math.cbrt(fill.moles)
    let { lowestReynolds, highestReynolds } = this
    let elapsed = 0
    for (let slab = first; slab < end; slab++) {
      if (reynolds[slab] < lowestReynolds) lowestReynolds = reynolds[slab]
      if (reynolds[slab] > highestReynolds) highestReynolds = reynolds[slab]
      const duration = (cubeRootMoles * slowness[slab]) / reynolds[slab]
      elapsed += duration
      durations[slab] = duration
      altitude[slab] = column.altitude(slab) + column.thickness / 2
      east[slab] = (windEast[slab] + (departure ? departure.east[slab] : 0)) * duration
      north[slab] = (windNorth[slab] + (departure ? departure.north[slab] : 0)) * duration
    }
    this.lowestReynolds = lowestReynolds
    this.highestReynolds = highestReynolds
    if (recorder) {
      this.recordSlabs(first, end, recorder)
      return
    }
    driftAlong(at, first, end, altitude, east, north)
    at.elapsed += elapsed
    at.altitude = column.altitude(end)
  }

  /** Moves through slabs [first, end) by their durations and drifts, telling a recorder of the way. */
  private recordSlabs(first: number, end: number, recorder: PathRecorder): void {
    const { at, column } = this
    for (let slab = first; slab < end; slab++) {
      const from = { ...at }
      const fromRate = this.rate
      driftAlong(at, slab, slab + 1, drifts.altitude, drifts.east, drifts.north)
      at.elapsed += durations[slab]
      at.altitude = column.altitude(slab + 1)
      // At the edge between two slabs the balloon rises at the mean of their rates.
      const next = Math.min(slab + 1, end - 1)
      this.rate = (column.thickness / durations[slab] + column.thickness / durations[next]) / 2
      recordStep(recorder, column, from, fromRate, at, this.rate, 'ascent')
    }
  }
}

/** One for all ascents, which never run at the same time. */
const rise = new Rise()

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

function stopsRisingIn(column: Column, balloon: AscendingBalloon, altitude: number): NotFlyable {
  // Per mole the displaced air weighs R·(T+ΔT)·ρ/p.
  const { edgeVolumePerMole } = column.rise(balloon.temperatureOffset)
  let leastDisplaced = Infinity
  for (let edge = column.slabAt(altitude); edge <= column.count; edge++) {
    leastDisplaced = Math.min(leastDisplaced, edgeVolumePerMole[edge] * column.edgeDensity[edge])
  }
  return stopsRising(balloon, altitude, leastDisplaced)
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
