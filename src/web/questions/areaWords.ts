import { plainNumber, unitOf } from '../readings.ts'

/** An area in the squares of the unit of distance shown now. */
export function areaWords(squareKilometres: number): string {
  const { symbol, one } = unitOf('distance')
  const value = (squareKilometres * 1e6) / one ** 2
  return `${plainNumber(value, value < 10 ? 1 : 0)} ${symbol}²`
}
