/** Radians in a degree. */
export const DEGREE = Math.PI / 180

/** Grams in a kilogram. */
export const GRAMS = 1000

/** Square centimetres in a square metre. */
export const SQUARE_CENTIMETRES = 1e4

/** Pascals in a hectopascal. */
export const HECTOPASCAL = 100

/** A number with at most so many decimals: what an answer shows is what is stored and compared. */
export function round(value: number, decimals: number): number {
  const scale = 10 ** decimals
  return Math.round(value * scale) / scale || 0 // never −0
}

/** An angle in radians as degrees to 1e-7, some centimetres on the ground. */
export function degrees(radians: number): number {
  return round(radians / DEGREE, 7)
}

/** A direction in radians as degrees in [0, 360). */
export function bearingDegrees(radians: number): number {
  return round(radians / DEGREE, 2) % 360
}

/** A time in s since 1970 UTC as ISO 8601 with `Z`. */
export function isoTime(seconds: number): string {
  return new Date(Math.round(seconds * 1000)).toISOString()
}

/** An ISO 8601 time with zone in s since 1970 UTC. */
export function seconds(iso: string): number {
  return Date.parse(iso) / 1000
}
