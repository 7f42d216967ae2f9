import { type TrackRow } from '../pictures/shownRun.ts'
import { type MapPlace } from './frame.ts'

interface Point {
  x: number
  y: number
}

/**
 * The moment at which a track is nearest to a point of the screen, s after release; null where it is
 * farther than `reach` pixels. `places` are those of the track's rows.
 */
export function nearestMoment(
  track: readonly TrackRow[],
  places: readonly MapPlace[],
  { x, y, reach }: Point & { reach: number },
  project: (place: MapPlace) => Point,
): number | null {
  let nearest = reach
  let moment: number | null = null
  let from = project(places[0])
  for (let index = 1; index < places.length; index++) {
    const to = project(places[index])
    const [dx, dy] = [to.x - from.x, to.y - from.y]
    const square = dx * dx + dy * dy
    const share =
      square === 0 ? 0 : Math.min(1, Math.max(0, ((x - from.x) * dx + (y - from.y) * dy) / square))
    const distance = Math.hypot(x - from.x - share * dx, y - from.y - share * dy)
    if (distance < nearest) {
      nearest = distance
      const start = track[index - 1].elapsedS
      moment = start + share * (track[index].elapsedS - start)
    }
    from = to
  }
  return moment
}
