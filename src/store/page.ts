/** A request for one page of a list, newest first. */
export interface PageRequest {
  limit: number
  /** Answer only what is older than this id; null for the first page */
  before: string | null
}

/** One page of a list, and the id to ask for what follows it; null where nothing does. */
export interface Page<Row> {
  rows: Row[]
  next: string | null
}

/** Above every UUID: what the first page comes before. */
const FIRST = '~'

/** The id that a page's rows come before. */
export function beforeId(request: PageRequest): string {
  return request.before ?? FIRST
}

/** Makes a page of rows that were asked for with one more than its limit. */
export function page<Row extends { id: string }>(rows: Row[], request: PageRequest): Page<Row> {
  if (rows.length <= request.limit) return { rows, next: null }
  const kept = rows.slice(0, request.limit)
  return { rows: kept, next: kept.at(-1)?.id ?? null }
}
