import { type Grid } from './grid.ts'

/** Cells along each side of a tile; a tile holds the points on all four of its sides. */
export const TILE_CELLS = 16
export const TILE_SIDE = TILE_CELLS + 1
export const TILE_POINTS = TILE_SIDE * TILE_SIDE
export const TILE_BYTES = TILE_POINTS * Float32Array.BYTES_PER_ELEMENT

/** What stands at each level of each point of a loaded tile, in this order; SI. */
export const HEIGHT = 0
export const TEMPERATURE = 1
export const VAPOUR = 2
export const WIND_EAST = 3
export const WIND_NORTH = 4
export const LEVEL_VALUES = 5

/** How a grid is cut into square tiles, so that the air around one flight is read in few pieces. */
export interface Tiling {
  across: number
  down: number
}

export function tiling(grid: Grid): Tiling {
  const cells = grid.wraps ? grid.columns : grid.columns - 1
  return { across: Math.ceil(cells / TILE_CELLS), down: Math.ceil((grid.rows - 1) / TILE_CELLS) }
}

/**
 * A plane of values in rows, cut into tiles that follow each other row by row, each with its points
 * in rows. Neighbours share the points between them; the last tiles are filled up with NaN.
 */
export function cutIntoTiles(values: Float64Array, grid: Grid): Float32Array {
  const { columns, rows, wraps } = grid
  const { across, down } = tiling(grid)
  const tiles = new Float32Array(across * down * TILE_POINTS).fill(NaN)
  for (let row = 0; row < rows; row++) {
    // A row on the line between two tiles belongs to both.
    const last = Math.min(Math.floor(row / TILE_CELLS), down - 1)
    const first = row % TILE_CELLS === 0 && row > 0 ? row / TILE_CELLS - 1 : last
    for (let tileRow = first; tileRow <= last; tileRow++) {
      const rowInTile = row - tileRow * TILE_CELLS
      for (let tileColumn = 0; tileColumn < across; tileColumn++) {
        const from = tileColumn * TILE_CELLS
        const width = Math.min(TILE_SIDE, columns - from)
        const to = (tileRow * across + tileColumn) * TILE_POINTS + rowInTile * TILE_SIDE
        for (let point = 0; point < width; point++) {
          tiles[to + point] = values[row * columns + from + point]
        }
        if (wraps && width < TILE_SIDE) tiles[to + width] = values[row * columns]
      }
    }
  }
  return tiles
}
