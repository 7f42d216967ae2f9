import { AIR_MOLAR_MASS, MOLAR_GAS_CONSTANT } from './constants.ts'

export type GasKind = 'helium' | 'hydrogen'

/** Molar masses, kg/mol. IUPAC standard atomic weights 2021 (hydrogen: CIAAW's conventional 1.008 × 2). */
const MOLAR_MASS: Record<GasKind, number> = { helium: 4.002602e-3, hydrogen: 2.01588e-3 }

/** A lifting gas: `purity` is its mole fraction, the rest is air. */
export interface Gas {
  kind: GasKind
  purity: number
  /** How much warmer the gas is than the air around it in flight, K */
  temperatureOffset: number
}

/** Molar mass in kg/mol of a gas with its impurity. */
export function gasMolarMass(gas: Gas): number {
  return gas.purity * MOLAR_MASS[gas.kind] + (1 - gas.purity) * AIR_MOLAR_MASS
}

/** Density in kg/m³ of an ideal gas of `molarMass` kg/mol at K and Pa. */
export function gasDensity(molarMass: number, temperature: number, pressure: number): number {
  return (molarMass * pressure) / (MOLAR_GAS_CONSTANT * temperature)
}

/** Diameter in m of a sphere of `volume` m³. */
export function sphereDiameter(volume: number): number {
  return Math.cbrt((6 * volume) / Math.PI)
}

/** Volume in m³ of a sphere of `diameter` m. */
export function sphereVolume(diameter: number): number {
  return (Math.PI / 6) * diameter ** 3
}
