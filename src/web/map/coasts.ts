import type { Map as MapView, GeoJSONSource } from 'maplibre-gl'
import coarse from 'world-atlas/countries-110m.json?url'
import fine from 'world-atlas/countries-10m.json?url'
import middling from 'world-atlas/countries-50m.json?url'
import { type CoastAnswer, type CoastWish, type Extent } from './coastWorker.ts'
import { type MapFrame } from './frame.ts'

/** Scales of Natural Earth, each up to a zoom of the map; the finest is cut to what can be seen. */
const SCALES = [
  { upTo: 2.5, url: coarse, whole: true },
  { upTo: 5, url: middling, whole: true },
  { upTo: Infinity, url: fine, whole: false },
]

/** Coastlines and borders of a map, drawn in a thread of their own at the scale that its zoom asks for. */
export class Coasts {
  private readonly worker: Worker
  private readonly view: MapView
  private asked = ''
  private number = 0
  private drawn = 0
  /** What the drawn coasts cover; null for the world */
  private covered: Extent | null = null

  constructor(view: MapView) {
    this.view = view
    this.worker = new Worker(new URL('./coastWorker.ts', import.meta.url), { type: 'module' })
    this.worker.onmessage = ({ data }: MessageEvent<CoastAnswer>) => {
      if (data.number < this.drawn) return
      this.drawn = data.number
      for (const [source, drawn] of [
        ['land', data.land],
        ['borders', data.borders],
      ] as const) {
        void this.view.getSource<GeoJSONSource>(source)?.setData(drawn)
      }
      if (data.number === this.number) this.view.getContainer().dataset.coasts = 'drawn'
    }
  }

  /** Draws what the view shows now, where that is not drawn already. */
  refresh(frame: MapFrame): void {
    const zoom = this.view.getZoom()
    const scale = SCALES.find(({ upTo }) => zoom < upTo) ?? SCALES[0]
    const bounds = this.view.getBounds()
    const [west, south, east, north] = [
      bounds.getWest(),
      bounds.getSouth(),
      bounds.getEast(),
      bounds.getNorth(),
    ]
    const asked = `${scale.url} ${frame.turnedTo?.join() ?? 'upright'}`
    const covered = this.covered
    const holds =
      scale.whole ||
      (covered !== null &&
        west >= covered[0] &&
        south >= covered[1] &&
        east <= covered[2] &&
        north <= covered[3])
    if (asked === this.asked && holds) return
    this.asked = asked
    // Room around what is seen, so that a small move asks for nothing new.
    const [wide, high] = [east - west, north - south]
    this.covered = scale.whole ? null : [west - wide, south - high, east + wide, north + high]
    // The coarse world is there at once, and stays until the finer one is.
    if (this.drawn === 0) this.ask(coarse, frame, null)
    this.ask(scale.url, frame, this.covered && withinWorld(this.covered))
  }

  close(): void {
    this.worker.terminate()
  }

  private ask(url: string, { turnedTo }: MapFrame, extent: Extent | null): void {
    this.number += 1
    const wish = { number: this.number, url: new URL(url, location.href).href, turnedTo, extent }
    this.worker.postMessage(wish satisfies CoastWish)
  }
}

/** An extent that leaves the world's sheet at its edge is cut on both sides of it: it takes all. */
function withinWorld([west, south, east, north]: Extent): Extent {
  const crosses = west < -180 || east > 180
  return [crosses ? -180 : west, Math.max(south, -90), crosses ? 180 : east, Math.min(north, 90)]
}
