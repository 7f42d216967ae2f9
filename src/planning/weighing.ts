import { airDensity, emptyAirState } from '../physics/air.ts'
import { type Column } from '../physics/column.ts'
import { DRY_AIR_GAS_CONSTANT, MOLAR_GAS_CONSTANT } from '../physics/constants.ts'
import { fill } from '../physics/fill.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { gasMolarMass } from '../physics/gas.ts'

/** Air and gas that a fill is weighed in, SI. */
export interface WeighingAir {
  /** K */
  temperature: number
  /** Pa */
  pressure: number
  /** Vapour pressure, Pa */
  vapour: number
  /** The gas in the balloon, K */
  gasTemperature: number
}

/** What a weigher at the neck shows in some air. */
export interface Weighing {
  air: WeighingAir
  /** What the right fill shows there, kg */
  reads: number
  /** Neck lift at the site, once settled, of a fill that shows the wanted neck lift there, less the wanted one; kg */
  off: number
}

/** The air of the site at the neck: what the wanted neck lift is for. */
export function siteAir(plan: FlightPlan, column: Column): WeighingAir {
  const air = emptyAirState()
  column.air.sampleAltitude(plan.launch.altitude, air)
  // ρ = p/(Rd·Tv) and Tv = T/(1 − 0.378·e/p) solved for e: WMO-No. 8
  const virtual = air.pressure / (DRY_AIR_GAS_CONSTANT * air.density)
  const vapour = Math.max(0, ((1 - air.temperature / virtual) * air.pressure) / 0.378)
  return {
    temperature: air.temperature,
    pressure: air.pressure,
    vapour,
    gasTemperature: air.temperature,
  }
}

/** What a plan's fill shows in other air, and how far off a fill weighed there would be. */
export function weighIn(other: WeighingAir, plan: FlightPlan, column: Column): Weighing {
  const air = emptyAirState()
  column.air.sampleAltitude(plan.launch.altitude, air)
  const { neckLift, balloon, payloadMass, gas } = plan
  const right = fill(neckLift, balloon.mass, payloadMass, gas, air)
  const there = liftPerMole(other, gasMolarMass(gas))
  const here = right.grossLift / right.moles
  const reads = right.moles * there - balloon.mass
  const weighedMoles = (neckLift + balloon.mass) / there
  return { air: other, reads, off: weighedMoles * here - balloon.mass - neckLift }
}

/** Gross lift of each mole of gas, kg/mol: the air it displaces less itself. */
function liftPerMole(air: WeighingAir, molarMass: number): number {
  const { temperature, pressure, vapour, gasTemperature } = air
  const volume = (MOLAR_GAS_CONSTANT * gasTemperature) / pressure // ideal gas law
  return airDensity(temperature, pressure, vapour) * volume - molarMass
}
