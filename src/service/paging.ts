import { type Page, type PageRequest } from '../store/page.ts'
import { faultyRequest } from './problems.ts'

/** A page request of the store from a query; @throws Problem 400 where the cursor is none of ours. */
export function pageRequest(query: { limit: number; cursor?: string | undefined }): PageRequest {
  const { limit, cursor } = query
  if (cursor === undefined) return { limit, before: null }
  const before = Buffer.from(cursor, 'base64url').toString('latin1')
  if (!/^[0-9a-f-]{36}$/.test(before)) {
    throw faultyRequest(400, [
      { path: '?cursor', message: 'must be the nextCursor of an earlier page' },
    ])
  }
  return { limit, before }
}

/** A page of the store as answered. */
export function pageAnswer<Row, Item>(page: Page<Row>, item: (row: Row) => Item) {
  return {
    items: page.rows.map(item),
    nextCursor: page.next === null ? null : Buffer.from(page.next, 'latin1').toString('base64url'),
  }
}
