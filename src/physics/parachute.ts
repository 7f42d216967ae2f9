import { SEA_LEVEL_DENSITY, STANDARD_GRAVITY } from './constants.ts'

/** A parachute: its drag area Cd·A in m², its size, or the speed in m/s at which it lands this load. */
export type Parachute =
  { dragArea: number } | { diameter: number; dragCoefficient: number } | { seaLevelDescent: number }

/** Drag area Cd·A in m² of a parachute under a falling mass of `load` kg. */
export function dragArea(parachute: Parachute, load: number): number {
  if ('dragArea' in parachute) return parachute.dragArea
  if ('diameter' in parachute) {
    return (parachute.dragCoefficient * Math.PI * parachute.diameter ** 2) / 4 // nominal area, Knacke, NWC TP 6575
  }
  const speed = parachute.seaLevelDescent
  return (2 * load * STANDARD_GRAVITY) / (SEA_LEVEL_DENSITY * speed * speed) // weight = ½·ρ·Cd·A·w²
}
