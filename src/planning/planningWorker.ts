import { constants, setPriority } from 'node:os'
import { isMainThread } from 'node:worker_threads'
import { LRUCache } from 'lru-cache'
import { type Column } from '../physics/column.ts'
import { type FlightPlan } from '../physics/flight.ts'
import { NotFlyable, type NotFlyableReason } from '../physics/notFlyable.ts'
import { BadSounding } from '../soundings/badSounding.ts'
import { type Sounding } from '../soundings/profile.ts'
import { readSoundings, type ReadOptions } from '../soundings/readSoundings.ts'
import { columnOf, type AirRecipe } from './airRecipe.ts'
import { positionsText } from './positionsText.ts'
import { flyMembers, summarize, type Dispersion } from './dispersion.ts'
import { MEMBER, MEMBER_VALUES, MemberFlights } from './memberFlights.ts'
import { type Region } from './regions.ts'
import { type Spread } from './spread.ts'
import { surveyTime, type Survey, type SurveyedTime } from './survey.ts'

/** What runs in the threads of the pool. Nothing here keeps anything but columns of air, tabulated. */

// Where planning and answering want the same core, answering goes first. On Linux a thread has a priority
// of its own; elsewhere this would be the whole program's.
if (!isMainThread && process.platform === 'linux') {
  setPriority(constants.priority.PRIORITY_BELOW_NORMAL)
}

/** Columns kept by each thread: some 20 kB each, and the levels of their soundings. */
const columns = new LRUCache<string, Column>({ max: 64 })

/** Air by its key, and its recipe where the thread is not known to have it. */
export interface AirOrder {
  key: string
  recipe: AirRecipe | null
}

/** The thread does not have this air: send it again with its recipe. */
export const AIR_MISSING = 'air missing'

/** An error does not keep its class between threads, its reason does. */
export interface Refused {
  notFlyable: NotFlyableReason
}

export interface MemberOrder {
  air: AirOrder
  plan: FlightPlan
  spread: Spread
  seed: number
  /** Members [first, end) of the dispersion */
  first: number
  end: number
  /** Rows of MEMBER_VALUES numbers, shared */
  rows: SharedArrayBuffer
}

/** Flies some members into the shared rows. */
export function fly(order: MemberOrder): typeof AIR_MISSING | Refused | 'flown' {
  return inAir(order.air, (column) => {
    const flights = new MemberFlights(order.plan, column, order.spread, order.seed)
    flyMembers(flights, order.first, order.end, new Float64Array(order.rows))
    return 'flown'
  })
}

export interface SummaryOrder {
  rows: SharedArrayBuffer
  spread: Spread
  regions: readonly Region[]
}

/** A summed-up dispersion; its points stand as text, which a busy event loop need then not write. */
export interface Summary {
  dispersion: Dispersion
  /** JSON of the landings as GeoJSON positions */
  points: string
}

/** Sums up flown members; null where none flew. */
export function summary(order: SummaryOrder): Summary | null {
  const rows = new Float64Array(order.rows)
  let flown = false
  for (let at = MEMBER.latitude; at < rows.length; at += MEMBER_VALUES) {
    flown ||= !Number.isNaN(rows[at])
  }
  if (!flown) return null
  const dispersion = summarize(rows, order.spread, order.regions)
  const points = positionsText(dispersion.landing.points)
  dispersion.landing.points = new Float64Array(0) // no use in copying them across as well
  return { dispersion, points }
}

export interface SurveyOrder extends Survey {
  air: AirOrder
}

/** Flies one release time. */
export function survey(order: SurveyOrder): typeof AIR_MISSING | Refused | SurveyedTime {
  return inAir(order.air, (column) => surveyTime(order, column))
}

export interface ReadOrder {
  bytes: Uint8Array
  options: ReadOptions
}

/** Why bytes hold no sounding to fly in; the error itself does not keep its class between threads. */
export interface Unread {
  problems: BadSounding['problems']
  unparseable: boolean
}

/** Reads the soundings in some bytes. */
export function read({ bytes, options }: ReadOrder): Sounding[] | Unread {
  try {
    return readSoundings(bytes, options)
  } catch (error) {
    if (!(error instanceof BadSounding)) throw error
    return { problems: error.problems, unparseable: error.unparseable }
  }
}

function inAir<Result>(
  { key, recipe }: AirOrder,
  work: (column: Column) => Result,
): Result | typeof AIR_MISSING | Refused {
  let column = columns.get(key)
  if (!column) {
    if (!recipe) return AIR_MISSING
    column = columnOf(recipe)
    columns.set(key, column)
  }
  try {
    return work(column)
  } catch (error) {
    if (error instanceof NotFlyable) return { notFlyable: error.reason }
    throw error
  }
}
