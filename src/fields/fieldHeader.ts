import { type Origin, type Quantity } from './product.ts'
import { type Skipped } from './planes.ts'

/** First bytes of a field file; the digit is the form's version. */
export const MAGIC = 'Driftbook field 1\n'

/** At the end of a field file: where its header begins, and how long it is; two doubles. */
export const TRAILER_BYTES = 16

/** A stored forecast, but for its values. Times in s since 1970 UTC. */
export interface FieldHeader {
  origin: Origin
  /** The latest there is, where planes come from several runs */
  referenceTime: number
  /** Ascending */
  validTimes: readonly number[]
  /** Pa, from the ground up */
  levels: readonly number[]
  /** What is known of humidity, from the ground up to which level; null where nothing is */
  humidity: { quantity: 'relativeHumidity' | 'specificHumidity'; levels: readonly number[] } | null
  /** Geopotential heights, m, of the lowest point of the lowest level and the highest of the highest */
  heights: { bottom: number; top: number }
  /** Section 3 of the messages, base64 */
  grid: string
  /** Where each plane begins in the file, bytes, by valid time and level */
  planes: Readonly<Partial<Record<Quantity, readonly (readonly number[])[]>>>
  skipped: readonly Skipped[]
}

/** Every level of a field has all of these. */
const NEEDED = ['geopotentialHeight', 'temperature', 'windEast', 'windNorth'] as const
const HUMIDITIES = ['relativeHumidity', 'specificHumidity'] as const

/** A plane that has been stored. */
export interface StoredPlane {
  quantity: Quantity
  pressure: number
  validTime: number
  referenceTime: number
  position: number
  /** Least and greatest value; NaN where every value is missing */
  least: number
  greatest: number
}

/** The stored planes that make a whole field, and those that do not. */
export interface Choice {
  levels: number[]
  validTimes: number[]
  humidity: FieldHeader['humidity']
  planes: Partial<Record<Quantity, StoredPlane[][]>>
  unused: string[]
}

/**
 * Chooses levels and times so that every level has height, temperature and wind at every time: the
 * level set of one of the times, such that levels times times is greatest. Null where there are no
 * two such levels.
 */
export function chooseLevels(stored: Iterable<StoredPlane>): Choice | null {
  const byTime = new Map<number, Map<number, Map<Quantity, StoredPlane>>>()
  for (const plane of stored) {
    const levels = getOrAdd(
      byTime,
      plane.validTime,
      () => new Map<number, Map<Quantity, StoredPlane>>(),
    )
    getOrAdd(levels, plane.pressure, () => new Map<Quantity, StoredPlane>()).set(
      plane.quantity,
      plane,
    )
  }
  const complete = Array.from(byTime, ([time, levels]) => {
    const whole = [...levels].filter(([, planes]) =>
      NEEDED.every((quantity) => planes.has(quantity)),
    )
    return { time, levels: new Set(whole.map(([pressure]) => pressure)) }
  })
  let best = { time: 0, levels: new Set<number>() }
  let bestScore = 0
  for (const candidate of complete) {
    const times = complete.filter(({ levels }) => hasAll(levels, candidate.levels)).length
    const score = times * candidate.levels.size
    if (score > bestScore && candidate.levels.size >= 2) {
      best = candidate
      bestScore = score
    }
  }
  if (bestScore === 0) return null

  const levels = [...best.levels].sort((a, b) => b - a)
  const validTimes = complete
    .filter((other) => hasAll(other.levels, best.levels))
    .map(({ time }) => time)
    .sort((a, b) => a - b)
  const find = (quantity: Quantity, time: number, pressure: number) =>
    byTime.get(time)?.get(pressure)?.get(quantity)
  const humidLevels = (quantity: Quantity) =>
    levels.filter((pressure) => validTimes.every((time) => find(quantity, time, pressure)))
  const humidity = HUMIDITIES.map((quantity) => ({
    quantity,
    levels: humidLevels(quantity),
  })).reduce((a, b) => (b.levels.length > a.levels.length ? b : a))
  const kept = humidity.levels.length > 0 ? humidity : null

  const planes: Choice['planes'] = {}
  const tabulate = (quantity: Quantity, at: readonly number[]) => {
    planes[quantity] = validTimes.map((time) =>
      at.flatMap((pressure) => find(quantity, time, pressure) ?? []),
    )
  }
  for (const quantity of NEEDED) tabulate(quantity, levels)
  if (kept) tabulate(kept.quantity, kept.levels)

  const used = new Set(Object.values(planes).flat(2))
  const unused: string[] = []
  for (const [time, timeLevels] of byTime) {
    for (const [pressure, quantities] of timeLevels) {
      for (const [quantity, plane] of quantities) {
        if (used.has(plane)) continue
        const why = !validTimes.includes(time)
          ? 'at a time without all levels'
          : best.levels.has(pressure)
            ? 'not needed beside another measure of humidity'
            : `at ${pressure / 100} hPa, which lacks a quantity or a time`
        unused.push(`${quantity} ${why}`)
      }
    }
  }
  return { levels, validTimes, humidity: kept, planes, unused }
}

function hasAll(levels: ReadonlySet<number>, wanted: ReadonlySet<number>): boolean {
  for (const level of wanted) if (!levels.has(level)) return false
  return true
}

function getOrAdd<K, V>(map: Map<K, V>, key: K, make: () => V): V {
  let value = map.get(key)
  if (value === undefined) {
    value = make()
    map.set(key, value)
  }
  return value
}
