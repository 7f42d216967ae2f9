import { signal } from '@preact/signals'
import type { Polygon, Position } from 'geojson'
import { type GeoJSONSource, type Map as MapView } from 'maplibre-gl'
import { type MapFrame, type MapPlace } from './frame.ts'
import { NOTHING } from './shapes.ts'

/** How near to the first corner a click closes the area, CSS pixels. */
const CLOSING = 12

/** Draws an area on the map, corner by corner: by clicks, or by keys at the map's middle. */
export class AreaPen {
  /** Corners so far; null while nothing is drawn */
  readonly corners = signal<readonly MapPlace[] | null>(null)
  private readonly view: MapView
  private readonly frame: () => MapFrame
  private readonly done: (polygon: Polygon) => void

  constructor(view: MapView, frame: () => MapFrame, done: (polygon: Polygon) => void) {
    this.view = view
    this.frame = frame
    this.done = done
  }

  get drawing(): boolean {
    return this.corners.peek() !== null
  }

  start(): void {
    this.put([])
    this.view.getCanvas().focus()
  }

  cancel(): void {
    this.put(null)
  }

  /** A click at a place: one more corner, or the end where it is the first corner again. */
  click(place: MapPlace): void {
    const corners = this.corners.peek() ?? []
    const first = corners.at(0)
    if (first && corners.length > 2) {
      const [a, b] = [this.view.project(first), this.view.project(place)]
      if (Math.hypot(a.x - b.x, a.y - b.y) < CLOSING) {
        this.finish()
        return
      }
    }
    this.put([...corners, place])
  }

  /** Closes the area and hands it over; nothing while it has fewer than three corners. */
  finish(): void {
    const corners = this.corners.peek() ?? []
    if (corners.length < 3) return
    const frame = this.frame()
    const ring = corners.map((corner): Position => frame.toEarth(corner))
    this.put(null)
    this.done({ type: 'Polygon', coordinates: [counterclockwise(unbroken([...ring, ring[0]]))] })
  }

  /** Whether a key was one of drawing: Enter sets a corner at the map's middle, F ends, Escape drops. */
  key(key: string): boolean {
    if (!this.drawing) return false
    const { lng, lat } = this.view.getCenter()
    if (key === 'Enter') this.click([lng, lat])
    else if (key === 'f' || key === 'F') this.finish()
    else if (key === 'Escape') this.cancel()
    else if (key === 'Backspace') this.put((this.corners.peek() ?? []).slice(0, -1))
    else return false
    return true
  }

  private put(corners: readonly MapPlace[] | null): void {
    this.corners.value = corners
    const line = corners && corners.length > 2 ? [...corners, corners[0]] : corners
    void this.view.getSource<GeoJSONSource>('drawn')?.setData(
      !line || line.length === 0
        ? NOTHING
        : line.length === 1
          ? { type: 'Point', coordinates: line[0] }
          : {
              type: 'GeometryCollection',
              geometries: [
                { type: 'LineString', coordinates: [...line] },
                { type: 'MultiPoint', coordinates: [...line] },
              ],
            },
    )
  }
}

/** A ring the way round that outer rings go (RFC 7946, 3.1.6). */
function counterclockwise(ring: Position[]): Position[] {
  const twiceArea = ring.slice(1).reduce((sum, [x, y], index) => {
    const [x0, y0] = ring[index]
    return sum + x0 * y - x * y0
  }, 0)
  return twiceArea < 0 ? ring.reverse() : ring
}

/** A ring whose longitudes run on past 180°, as a polygon that is not cut there has them. */
function unbroken(ring: readonly Position[]): Position[] {
  const [[first]] = ring
  return ring.map(([x, y]) => [x - first > 180 ? x - 360 : x - first < -180 ? x + 360 : x, y])
}
