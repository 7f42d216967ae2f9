import { gasMolarMass, type Gas } from '../physics/gas.ts'
import { molesIn } from '../physics/realGas.ts'

/** A full cylinder, SI. Pressures are absolute. */
export interface Cylinder {
  /** m³ of water that it holds */
  waterVolume: number
  /** Pa */
  pressure: number
  /** K: of the full cylinder, and of the emptied one once it has warmed up again */
  temperature: number
  /** Pressure, Pa, at which a cylinder is taken off */
  leave: number
}

/** How many cylinders a fill takes. */
export interface CylinderCount {
  count: number
  /** Pressure, Pa, in the last one when the fill is done and it has warmed up again */
  lastLeft: number
  /** kg that each cylinder gives down to the pressure at which it is taken off */
  gasPerCylinder: number
}

/**
 * The cylinders that a fill of `gasMass` kg takes, with the gas as real as it is under pressure. An impure
 * gas is taken to be as compressible as its main part. The cylinder must hold more than it leaves.
 */
export function cylindersFor(gasMass: number, gas: Gas, cylinder: Cylinder): CylinderCount {
  const { waterVolume, pressure, temperature, leave } = cylinder
  const molarMass = gasMolarMass(gas)
  const held = (at: number) => molarMass * molesIn(gas.kind, waterVolume, temperature, at)
  const full = held(pressure)
  const gasPerCylinder = full - held(leave)
  const count = Math.max(1, Math.ceil(gasMass / gasPerCylinder - 1e-9))
  const left = full - (gasMass - (count - 1) * gasPerCylinder)
  // The mass held rises with pressure: halve the bracket down to a pascal.
  let low = leave
  let high = pressure
  while (high - low > 1) {
    const middle = (low + high) / 2
    if (held(middle) < left) low = middle
    else high = middle
  }
  return { count, lastLeft: (low + high) / 2, gasPerCylinder }
}
