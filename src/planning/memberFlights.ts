import { emptyAirState, type AirState } from '../physics/air.ts'
import { ascend, emptyAscentEnd, type AscendingBalloon } from '../physics/ascent.ts'
import { type Column, type WindDeparture } from '../physics/column.ts'
import { descend, emptyDescentEnd } from '../physics/descent.ts'
import { dragCurve } from '../physics/dragCurves.ts'
import { fill, refill } from '../physics/fill.ts'
import { fly, type FlightPlan } from '../physics/flight.ts'
import { gasMolarMass, sphereVolume } from '../physics/gas.ts'
import { NotFlyable } from '../physics/notFlyable.ts'
import { dragArea } from '../physics/parachute.ts'
import { normalQuantile } from './normal.ts'
import { hash, ScrambledSobol } from './sobol.ts'
import { SCALAR_INPUTS, type Spread } from './spread.ts'
import { WindErrorModes } from './windError.ts'

/** Independent scramblings that the members are dealt to in turn: their scatter tells the estimate's error. */
export const REPLICATES = 8

/** Values that a member's flight leaves: those of `Member`, in its order. */
export const MEMBER_VALUES = 6 + SCALAR_INPUTS.length

/** Where each value of a member stands in its row; a member that does not fly has NaN in the first four. */
export const MEMBER = {
  latitude: 0,
  longitude: 1,
  /** Seconds since the planned release */
  elapsed: 2,
  burstAltitude: 3,
  /** Standard normal coordinates of the scalar inputs, in their order */
  inputs: 4,
  /** Drift that the wind's error makes on the nominal flight, m */
  windEast: 4 + SCALAR_INPUTS.length,
  windNorth: 5 + SCALAR_INPUTS.length,
} as const

/** Euler's constant: the mean of the logarithm of an exponential variable, less its sign. */
const EULER = 0.5772156649015329

/**
 * The members of a dispersion: a plan flown in one column with its uncertain inputs strewn. A member's
 * flight depends on the seed and its own number alone, so any worker may fly any of them; nothing is
 * allocated for each.
 */
export class MemberFlights {
  private readonly plan: FlightPlan
  private readonly column: Column
  private readonly spread: Spread
  private readonly sequences: ScrambledSobol[]
  private readonly wind: WindErrorModes
  private readonly coordinates: Float64Array
  private readonly departure: WindDeparture
  /** Drift that each mode of the wind's error makes on the nominal flight, m. */
  private readonly modeDrifts: Float64Array
  private readonly site: AirState = emptyAirState()
  private readonly molarMass: number
  private readonly parachuteDragArea: number
  private readonly balloon: AscendingBalloon
  private readonly load = { mass: 0, dragArea: 0 }
  private readonly at = { latitude: 0, longitude: 0, altitude: 0.5, elapsed: 0.5 }
  private readonly ascent = emptyAscentEnd()
  private readonly descent = emptyDescentEnd()

  /** @throws NotFlyable where the plan itself does not fly */
  constructor(plan: FlightPlan, column: Column, spread: Spread, seed: number) {
    const { launch, balloon, gas, payloadMass, landingAltitude } = plan
    this.plan = plan
    this.column = column
    this.spread = spread
    const residence = new Float64Array(column.count)
    const nominal = flyForResidence(plan, column, residence)
    const bottom = Math.min(launch.altitude, landingAltitude)
    this.wind = new WindErrorModes(column, bottom, nominal.burst.altitude * 1.15, spread.wind)
    this.modeDrifts = this.wind.drifts(residence)
    const dimensions = SCALAR_INPUTS.length + 2 * this.wind.count
    this.coordinates = new Float64Array(dimensions)
    this.sequences = Array.from(
      { length: REPLICATES },
      (_, replicate) => new ScrambledSobol(dimensions, hash(seed) ^ hash(0x9e3779b9 + replicate)),
    )
    this.departure = {
      east: new Float64Array(column.count),
      north: new Float64Array(column.count),
    }
    column.air.sampleAltitude(launch.altitude, this.site)
    this.molarMass = gasMolarMass(gas)
    // The parachute is built for the nominal load, whatever then hangs below it.
    const nominalLoad = payloadMass + balloon.shareLeftOnLine * balloon.mass
    this.parachuteDragArea = dragArea(plan.parachute, nominalLoad)
    this.balloon = {
      fill: fill(plan.neckLift, balloon.mass, payloadMass, gas, this.site),
      mass: 0,
      temperatureOffset: gas.temperatureOffset,
      burstVolume: 0,
      drag: dragCurve(plan.drag),
      dragFactor: 1,
    }
  }

  /** Flies member `member` and writes its values to `out` from `at` on. */
  fly(member: number, out: Float64Array, at: number): void {
    const { coordinates, sequences, wind, departure, modeDrifts } = this
    sequences[member % REPLICATES].point(Math.floor(member / REPLICATES), coordinates)
    const burstShare = coordinates[2]
    for (let i = 0; i < coordinates.length; i++) coordinates[i] = normalQuantile(coordinates[i])
    for (let i = 0; i < SCALAR_INPUTS.length; i++) out[at + MEMBER.inputs + i] = coordinates[i]

    let windEast = 0
    let windNorth = 0
    if (wind.count > 0) {
      wind.fill(coordinates, SCALAR_INPUTS.length, departure)
      for (let mode = 0; mode < wind.count; mode++) {
        windEast += modeDrifts[mode] * coordinates[SCALAR_INPUTS.length + 2 * mode]
        windNorth += modeDrifts[mode] * coordinates[SCALAR_INPUTS.length + 2 * mode + 1]
      }
    }
    out[at + MEMBER.windEast] = windEast
    out[at + MEMBER.windNorth] = windNorth

    if (this.flyStrewn(burstShare)) {
      out[at + MEMBER.latitude] = this.at.latitude
      out[at + MEMBER.longitude] = this.at.longitude
      out[at + MEMBER.elapsed] = this.at.elapsed + this.spread.releaseTime * coordinates[6]
      out[at + MEMBER.burstAltitude] = this.burstAltitude
    } else {
      out.fill(NaN, at, at + MEMBER.inputs)
    }
  }

  private burstAltitude = 0.5

  /** Flies with the present coordinates; false where that does not fly. */
  private flyStrewn(burstShare: number): boolean {
    const { plan, column, spread, coordinates, ascent, descent, load } = this
    const flying = this.balloon
    const nominal = plan.balloon
    const neckLift = plan.neckLift + spread.neckLift * coordinates[0]
    const balloonMass = Math.max(
      0.1 * nominal.mass,
      nominal.mass + spread.balloonMass * coordinates[1],
    )
    const burstDiameter =
      nominal.ratedBurstDiameter * burstFactor(burstShare, spread.burstDiameterShare)
    if (!(neckLift > plan.payloadMass)) return false
    refill(flying.fill, neckLift, balloonMass, plan.payloadMass, this.molarMass, this.site)
    flying.mass = balloonMass + plan.payloadMass + flying.fill.gasMass
    flying.burstVolume = sphereVolume(burstDiameter)
    flying.dragFactor = Math.exp(spread.dragShare * coordinates[3])
    const offsetVolume =
      flying.fill.volume * (1 + plan.gas.temperatureOffset / this.site.temperature)
    if (!(flying.burstVolume > Math.max(flying.fill.volume, offsetVolume))) return false

    const left = reflect(nominal.shareLeftOnLine + spread.shareLeftOnLine * coordinates[5])
    load.mass = plan.payloadMass + left * balloonMass
    load.dragArea = this.parachuteDragArea * Math.exp(spread.dragAreaShare * coordinates[4])

    const { at } = this
    at.latitude = plan.launch.latitude
    at.longitude = plan.launch.longitude
    at.altitude = plan.launch.altitude
    at.elapsed = 0
    const departure = this.wind.count > 0 ? this.departure : undefined
    try {
      ascend(flying, column, at, ascent, undefined, departure)
    } catch (error) {
      if (error instanceof NotFlyable) return false
      throw error
    }
    if (!(at.altitude > plan.landingAltitude)) return false
    this.burstAltitude = at.altitude
    descend(
      load,
      ascent.burstRate,
      plan.landingAltitude,
      column.descent,
      at,
      descent,
      undefined,
      departure,
    )
    return true
  }
}

/**
 * Factor on the rated burst diameter whose logarithm has the standard deviation `spread`: Weibull's
 * weakest-link distribution, whose logarithm is −Gumbel (J. Appl. Mech. 18, 1951, p. 293). Low bursts
 * stray farther than high ones. `share` is the probability of a smaller factor.
 */
export function burstFactor(share: number, spread: number): number {
  const scale = (spread * Math.sqrt(6)) / Math.PI
  return Math.exp(scale * (Math.log(-Math.log1p(-share)) + EULER))
}

/** A share brought into 0 to 1 by reflection at both ends. */
function reflect(share: number): number {
  const turn = Math.abs(share) % 2
  return turn > 1 ? 2 - turn : turn
}

/** Flies the plan and adds up the seconds that it spends in each slab. */
function flyForResidence(plan: FlightPlan, column: Column, residence: Float64Array) {
  let elapsed = 0
  let altitude = plan.launch.altitude
  return fly(plan, column, {
    record(at) {
      const slab = column.slabAt((altitude + at.altitude) / 2)
      residence[slab] += at.elapsed - elapsed
      elapsed = at.elapsed
      altitude = at.altitude
    },
  })
}
