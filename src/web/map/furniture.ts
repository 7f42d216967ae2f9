import { type GeoJSONSource, type Map as MapView } from 'maplibre-gl'
import { plainNumber, unitOf } from '../readings.ts'
import { type MapFrame, type MapPlace, sphereDistance } from './frame.ts'
import { graticule, type GraticuleLine } from './graticule.ts'
import { scaleBar } from './scale.ts'

/** The longest distance scale, CSS pixels. */
const SCALE_ROOM = 160

/** How far inside the map's edge the labels stand, CSS pixels. */
const INSET = 4

/** What frames the map: graticule with labels, distance scale. */
export class Furniture {
  private readonly view: MapView
  private readonly labels = layerOf('graticule-labels')
  private readonly scale = layerOf('distance-scale')
  private lines: GraticuleLine[] = []

  constructor(view: MapView) {
    this.view = view
    view.getContainer().append(this.labels, this.scale)
  }

  /** Draws it anew for what is seen now. */
  draw(frame: MapFrame): void {
    const bounds = this.view.getBounds()
    this.lines = graticule(frame, [
      bounds.getWest(),
      bounds.getSouth(),
      bounds.getEast(),
      bounds.getNorth(),
    ])
    void this.view.getSource<GeoJSONSource>('graticule')?.setData({
      type: 'MultiLineString',
      coordinates: this.lines.map(({ points }) => points),
    })
    this.place()
    this.drawScale(frame)
  }

  /** Moves the labels along with the map. */
  place(): void {
    const { clientWidth, clientHeight } = this.view.getContainer()
    this.labels.replaceChildren(
      ...this.lines.flatMap((line) => {
        const meridian = line.kind === 'meridian'
        const at = this.crossing(line.points, meridian, INSET)
        if (
          at === null ||
          at < (meridian ? 52 : 30) ||
          at > (meridian ? clientWidth - 40 : clientHeight - 50)
        ) {
          return []
        }
        const label = document.createElement('span')
        label.textContent = line.label
        label.className = line.kind
        label.style.transform = meridian
          ? `translate(${at}px, 0) translate(-50%, ${INSET}px)`
          : `translate(${INSET}px, ${at}px) translate(0, -50%)`
        return [label]
      }),
    )
  }

  /** Where a line first crosses the map's upper edge (its x) or left edge (its y), pixels; null if never. */
  private crossing(points: readonly MapPlace[], upper: boolean, edge: number): number | null {
    let before = this.view.project(points[0])
    for (const point of points.slice(1)) {
      const here = this.view.project(point)
      const [a, b] = upper ? [before.y, here.y] : [before.x, here.x]
      if (a !== b && (a - edge) * (b - edge) <= 0) {
        const share = (edge - a) / (b - a)
        return upper
          ? before.x + share * (here.x - before.x)
          : before.y + share * (here.y - before.y)
      }
      before = here
    }
    return null
  }

  private drawScale(frame: MapFrame): void {
    const { clientWidth, clientHeight } = this.view.getContainer()
    const [y, x] = [clientHeight / 2, clientWidth / 2]
    const ends = [x - 50, x + 50].map((at) => this.view.unproject([at, y]))
    const [from, to] = ends.map(({ lng, lat }) => frame.toEarth([lng, lat]))
    const { one, symbol } = unitOf('distance')
    const { pixels, length } = scaleBar(
      sphereDistance(from, to) / 100 / one,
      Math.min(SCALE_ROOM, clientWidth / 3),
    )
    this.scale.style.width = `${pixels}px`
    this.scale.textContent = `${plainNumber(length, length < 1 ? Math.ceil(-Math.log10(length)) : 0)} ${symbol}`
  }
}

function layerOf(name: string): HTMLDivElement {
  const element = document.createElement('div')
  element.className = name
  return element
}
