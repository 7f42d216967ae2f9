/** A value as the message gives it, in the unit of table B; null where it is missing. */
export type Cell = number | string | null

/** One element of a message: a cell for each subset, or one for all of them. */
export interface BufrElement {
  descriptor: number
  cells: readonly Cell[]
}

/** The elements of a message, or of one pass through a replication, in their order. */
export interface BufrBlock {
  elements: BufrElement[]
  blocks: BufrBlock[]
}

/** The cell of one subset. */
export function cellOf({ cells }: BufrElement, subset: number): Cell {
  return cells.length === 1 ? cells[0] : cells[subset]
}
