/** 0 °C in K (SI Brochure, 9th edition, 2019, section 2.3.1). */
const ICE_POINT = 273.15

/** A temperature in K as °C; undefined stays so. */
export function celsius(kelvin: number | undefined): number | undefined {
  return kelvin === undefined ? undefined : kelvin - ICE_POINT
}
