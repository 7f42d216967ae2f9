const POINTS = [
  'north',
  'north-northeast',
  'northeast',
  'east-northeast',
  'east',
  'east-southeast',
  'southeast',
  'south-southeast',
  'south',
  'south-southwest',
  'southwest',
  'west-southwest',
  'west',
  'west-northwest',
  'northwest',
  'north-northwest',
] as const

/** The nearest of the sixteen points of the compass to a direction in degrees, in words. */
export function compassPoint(degrees: number): string {
  return POINTS[((Math.round(degrees / 22.5) % 16) + 16) % 16]
}
