import { type FieldAnswer } from '../../service/schemas/field.ts'

/** West, south, east, north of a rectangle of the world's sheet, degrees; east may be above 180. */
export type Sheet = [number, number, number, number]

/** The outline of a forecast's grid: longitude running on from its first corner, and latitude, degrees. */
export function outlineOf({ grid }: Pick<FieldAnswer, 'grid'>): [number, number][] {
  const [firstStart, firstEnd, lastStart, lastEnd] = grid.corners
  if (grid.wraps) {
    const [a, b] = [firstStart.latitudeDeg, lastStart.latitudeDeg]
    return [
      [-180, a],
      [180, a],
      [180, b],
      [-180, b],
    ]
  }
  const start = firstStart.longitudeDeg
  const on = (longitude: number, from: number) => from + ((((longitude - from) % 360) + 360) % 360)
  const near = (longitude: number, from: number) => on(longitude, from - 180)
  const end = on(firstEnd.longitudeDeg, start)
  const lower = near(lastStart.longitudeDeg, start)
  return [
    [start, firstStart.latitudeDeg],
    [end, firstEnd.latitudeDeg],
    [on(lastEnd.longitudeDeg, lower), lastEnd.latitudeDeg],
    [lower, lastStart.latitudeDeg],
  ]
}

/** The part of the world's sheet that shows an outline with room around it. */
export function sheetAround(outline: readonly [number, number][]): Sheet {
  const xs = outline.map(([x]) => x)
  const ys = outline.map(([, y]) => y)
  const [west, east] = [Math.min(...xs), Math.max(...xs)]
  const room = 5 + 0.15 * (Math.max(...ys) - Math.min(...ys))
  const across = east - west >= 360 ? 0 : room
  return [
    Math.max(west - across, -360),
    Math.max(Math.min(...ys) - room, -90),
    Math.min(east + across, 540),
    Math.min(Math.max(...ys) + room, 90),
  ]
}
