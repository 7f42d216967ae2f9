import { UnsupportedGrib } from './gribError.ts'

/** The order in which a grid's values stand in a message. WMO flag table 3.4. */
export interface Scanning {
  /** Points of the first row run towards east (+i) rather than west */
  eastward: boolean
  /** Rows follow each other towards north (+j) rather than south */
  northward: boolean
  /** Neighbours along j, not along i, stand next to each other */
  columnsFirst: boolean
  /** Every second row, or column, runs the other way */
  alternating: boolean
}

/** @throws UnsupportedGrib for rows that are shifted against each other. */
export function readScanning(flags: number): Scanning {
  if (flags & 0x0f) throw new UnsupportedGrib('grid rows shifted against each other')
  return {
    eastward: (flags & 0x80) === 0,
    northward: (flags & 0x40) !== 0,
    columnsFirst: (flags & 0x20) !== 0,
    alternating: (flags & 0x10) !== 0,
  }
}

/** Values in the order of the message, brought into rows that all run like the first. */
export function inRows(
  values: Float64Array,
  columns: number,
  rows: number,
  { columnsFirst, alternating }: Scanning,
): Float64Array {
  if (!columnsFirst && !alternating) return values
  const ordered = new Float64Array(values.length)
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      const across = alternating && row % 2 === 1 ? columns - 1 - column : column
      const along = alternating && column % 2 === 1 ? rows - 1 - row : row
      const from = columnsFirst ? column * rows + along : row * columns + across
      ordered[row * columns + column] = values[from]
    }
  }
  return ordered
}
