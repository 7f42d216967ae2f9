import { reading } from './readings.ts'

/** A distance as short as it is exact enough. */
export function distanceWords(metres: number): string {
  return reading('distance', metres, metres < 20_000 ? 1 : 0)
}

/** A span of time in hours and minutes. */
export function durationWords(seconds: number): string {
  const minutes = Math.round(seconds / 60)
  if (minutes < 60) return `${minutes} min`
  return `${Math.floor(minutes / 60)} h ${minutes % 60} min`
}
