import { type AirState } from './air.ts'
import { MOLAR_GAS_CONSTANT } from './constants.ts'
import { gasDensity, gasMolarMass, sphereDiameter, type Gas } from './gas.ts'

/** A filled balloon at the site, SI: kilograms of lift are kilograms-force over standard gravity. */
export interface Fill {
  neckLift: number
  grossLift: number
  freeLift: number
  /** m³ at the site's pressure and temperature */
  volume: number
  diameter: number
  gasMass: number
  /** Moles of gas: constant in flight */
  moles: number
}

/**
 * The gas that lifts `neckLift` kg at the neck of a balloon of `balloonMass` kg in the air of the site,
 * with `payloadMass` kg to be hung below. The gas has the pressure and temperature of the air.
 */
export function fill(
  neckLift: number,
  balloonMass: number,
  payloadMass: number,
  gas: Gas,
  site: AirState,
): Fill {
  const filled: Fill = {
    neckLift,
    grossLift: 0,
    freeLift: 0,
    volume: 0,
    diameter: 0,
    gasMass: 0,
    moles: 0,
  }
  refill(filled, neckLift, balloonMass, payloadMass, gasMolarMass(gas), site)
  return filled
}

/** Makes `out` the fill with gas of `molarMass` kg/mol: `fill` for many flights. */
export function refill(
  out: Fill,
  neckLift: number,
  balloonMass: number,
  payloadMass: number,
  molarMass: number,
  site: AirState,
): void {
  out.neckLift = neckLift
  out.grossLift = neckLift + balloonMass
  out.freeLift = neckLift - payloadMass
  // Archimedes: the displaced air less the gas carries the gross lift.
  out.volume =
    out.grossLift / (site.density - gasDensity(molarMass, site.temperature, site.pressure))
  out.diameter = sphereDiameter(out.volume)
  out.moles = (site.pressure * out.volume) / (MOLAR_GAS_CONSTANT * site.temperature) // ideal gas law
  out.gasMass = out.moles * molarMass
}
