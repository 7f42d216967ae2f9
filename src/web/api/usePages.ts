import { useEffect, useState } from 'preact/hooks'
import { call } from './client.ts'

/** A list of the service as far as it was read. */
export interface Pages<Item> {
  items: Item[]
  nextCursor: string | null
}

/** Items of a list that are asked for at once. */
const PAGE = 20

/** Reads a list page by page: the first at once, others with `load` and the cursor so far. */
export function usePages<Item>(path: string) {
  const [page, setPage] = useState<Pages<Item> | null>(null)
  const [trouble, setTrouble] = useState<string | null>(null)
  const load = async (cursor: string | null, before: Item[]) => {
    try {
      const more = cursor === null ? '' : `&cursor=${encodeURIComponent(cursor)}`
      const next = await call<Pages<Item>>('GET', `${path}?limit=${PAGE}${more}`)
      setPage({ items: [...before, ...next.items], nextCursor: next.nextCursor })
      setTrouble(null)
    } catch (error) {
      setTrouble(error instanceof Error ? error.message : String(error))
    }
  }
  useEffect(() => void load(null, []), [path])
  return { page, trouble, load }
}
