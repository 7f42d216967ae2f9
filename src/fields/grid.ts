import { type Scanning } from './scanning.ts'

/** A place in a grid's own index space; whole numbers are grid points, counted from the first one. */
export interface GridPlace {
  column: number
  row: number
}

/** Where the points of a field are. Rows and columns are counted in the order of the message. */
export interface Grid {
  readonly columns: number
  readonly rows: number
  /** The last column is the first one's neighbour */
  readonly wraps: boolean
  readonly scanning: Scanning
  /** Winds are given along the grid's axes and not towards east and north */
  readonly windsAlongGrid: boolean
  /** In the trade's words */
  readonly description: string
  /** Fills `out` with the place of a latitude and longitude (radians), inside the grid or not. */
  locate(latitude: number, longitude: number, out: GridPlace): void
  /** Latitude and longitude, radians, of a place in the grid. */
  position(column: number, row: number): { latitude: number; longitude: number }
  /** Angle, radians, from east anticlockwise to the grid's x axis at a place. */
  turn(column: number, row: number): number
}
