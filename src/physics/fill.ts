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
  const molarMass = gasMolarMass(gas)
  const grossLift = neckLift + balloonMass
  // Archimedes: the displaced air less the gas carries the gross lift.
  const volume = grossLift / (site.density - gasDensity(molarMass, site.temperature, site.pressure))
  const moles = (site.pressure * volume) / (MOLAR_GAS_CONSTANT * site.temperature) // ideal gas law
  return {
    neckLift,
    grossLift,
    freeLift: neckLift - payloadMass,
    volume,
    diameter: sphereDiameter(volume),
    gasMass: moles * molarMass,
    moles,
  }
}
