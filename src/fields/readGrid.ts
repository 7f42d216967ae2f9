import { readConicGrid } from './conicGrid.ts'
import { type Grid } from './grid.ts'
import { damaged, GribError, UnsupportedGrib } from './gribError.ts'
import { readLatLonGrid } from './latLonGrid.ts'
import { type Octets } from './octets.ts'

/**
 * Most grid points that are read: the finest global forecasts in use have under seven million. A message
 * of a hundred bytes may truly hold this many equal values, so this also bounds the memory it takes.
 */
export const MOST_POINTS = 12_000_000

/**
 * The grid of section 3.
 * @throws UnsupportedGrib for grids other than templates 3.0, 3.20 and 3.30; GribError if damaged.
 */
export function readGrid(section: Octets): Grid {
  const points = section.u32(7)
  const template = section.u16(13)
  if (section.u8(6) !== 0) throw new UnsupportedGrib('a grid defined by its centre')
  if (template !== 0 && template !== 20 && template !== 30) {
    throw new UnsupportedGrib(`grid template 3.${template}`)
  }
  if (section.u8(11) !== 0) throw new UnsupportedGrib('a grid with rows of different lengths')
  const columns = section.u32(31)
  const rows = section.u32(35)
  if (points > MOST_POINTS) {
    throw new GribError('too-large', `a grid of ${points} points; at most ${MOST_POINTS} are read`)
  }
  if (columns * rows !== points) {
    throw damaged(`a grid of ${columns} by ${rows} claims ${points} points`)
  }
  if (columns < 2 || rows < 2) throw new UnsupportedGrib(`a grid of ${columns} by ${rows} points`)
  return template === 0
    ? readLatLonGrid(section, columns, rows)
    : readConicGrid(section, columns, rows, template === 20 ? 'polar' : 'lambert')
}
