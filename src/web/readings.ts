import { kept } from './kept.ts'

export type UnitSystem = 'metric' | 'aviation'

/** The units that the page shows: metric, or feet, knots and nautical miles. */
export const unitSystem = kept<UnitSystem>(
  'driftbook.units',
  'metric',
  (value): value is UnitSystem => value === 'metric' || value === 'aviation',
)

/** How a quantity is shown: its value in the shown unit is `si / one`. */
export interface Unit {
  symbol: string
  /** The unit in SI */
  one: number
}

// International foot, nautical mile and knot: ICAO Annex 5.
const FOOT = 0.3048
const NAUTICAL_MILE = 1852

const units = {
  height: { metric: { symbol: 'm', one: 1 }, aviation: { symbol: 'ft', one: FOOT } },
  distance: {
    metric: { symbol: 'km', one: 1000 },
    aviation: { symbol: 'NM', one: NAUTICAL_MILE },
  },
  windSpeed: {
    metric: { symbol: 'm/s', one: 1 },
    aviation: { symbol: 'kt', one: NAUTICAL_MILE / 3600 },
  },
  verticalSpeed: {
    metric: { symbol: 'm/s', one: 1 },
    aviation: { symbol: 'ft/min', one: FOOT / 60 },
  },
} satisfies Record<string, Record<UnitSystem, Unit>>

export type Quantity = keyof typeof units

/** The unit that a quantity is shown in now. */
export function unitOf(quantity: Quantity): Unit {
  return units[quantity][unitSystem.value]
}

/** A value in SI as a reading with its unit, e.g. "31 240 m". */
export function reading(quantity: Quantity, si: number, decimals = 0): string {
  const { symbol, one } = unitOf(quantity)
  return `${plainNumber(si / one, decimals)} ${symbol}`
}

/** A number with thin spaces between the thousands. */
export function plainNumber(value: number, decimals = 0): string {
  const text = value.toLocaleString('en', {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
  })
  return text.replaceAll(',', '\u202f').replace('-', '\u2212')
}
