import { damaged, UnsupportedGrib } from './gribError.ts'
import { type Octets } from './octets.ts'

/** The earth that a projection is drawn on. */
export interface EarthShape {
  /** m */
  semiMajorAxis: number
  eccentricity: number
}

/** Semi-major and semi-minor axis, m, of the fixed shapes of WMO code table 3.2. */
const SHAPES: Readonly<Record<number, readonly [number, number] | undefined>> = {
  0: [6_367_470, 6_367_470],
  2: [6_378_160, 6_356_775],
  4: [6_378_137, 6_356_752.314],
  5: [6_378_137, 6_356_752.314245],
  6: [6_371_229, 6_371_229],
  8: [6_371_200, 6_371_200],
  9: [6_377_563.396, 6_356_256.909],
}

/** The shape of the earth in octets 15 to 30 of section 3, the same in every template read here. */
export function readEarthShape(grid: Octets): EarthShape {
  const code = grid.u8(15)
  let axes = SHAPES[code]
  if (code === 1) axes = [grid.scaled(16), grid.scaled(16)]
  if (code === 3) axes = [grid.scaled(21) * 1000, grid.scaled(26) * 1000]
  if (code === 7) axes = [grid.scaled(21), grid.scaled(26)]
  if (axes === undefined) throw new UnsupportedGrib(`shape of the earth ${code}`)
  const [major, minor] = axes
  if (!(major > 6e6 && major < 7e6 && minor > 6e6 && minor <= major)) {
    throw damaged(`an earth of ${major} m by ${minor} m`)
  }
  return { semiMajorAxis: major, eccentricity: Math.sqrt(1 - (minor / major) ** 2) }
}
