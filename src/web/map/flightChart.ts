import { AttributionControl, type GeoJSONSource, Map as MapView, setWorkerUrl } from 'maplibre-gl'
import 'maplibre-gl/dist/maplibre-gl.css'
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url'
import { cursorElapsed } from '../cursor.ts'
import { momentKeys } from '../pictures/momentKeys.ts'
import { Coasts } from './coasts.ts'
import { type FlightMapProps } from './flightMap.tsx'
import { frameFor, type MapFrame, type MapPlace } from './frame.ts'
import { Furniture } from './furniture.ts'
import { mapStyle } from './mapStyle.ts'
import { nearestMoment } from './nearestMoment.ts'
import { PlaceMarkers } from './placeMarkers.ts'
import { trackLines, trackPlaces } from './trackLines.ts'

setWorkerUrl(workerUrl)

/** A pointer this near to the track, CSS pixels, moves the moment. */
const REACH = 40

/** Room around a flight that is fitted into the view, CSS pixels. */
const MARGIN = 48

/** The map of a flight: the map library's map, and what is drawn on it. */
export class FlightChart {
  private readonly view: MapView
  private readonly coasts: Coasts
  private readonly furniture: Furniture
  private readonly markers: PlaceMarkers
  private readonly undo: (() => void)[] = []
  private props: FlightMapProps
  private frame: MapFrame
  private places: MapPlace[][]
  private ready = false

  constructor(box: HTMLElement, props: FlightMapProps) {
    this.props = props
    this.frame = frameOf(props)
    this.places = placesOf(props, this.frame)
    const view = new MapView({
      container: box,
      style: mapStyle(box),
      bounds: boundsOf(this.places),
      fitBoundsOptions: { padding: MARGIN, maxZoom: 13 },
      attributionControl: false,
      pitchWithRotate: false,
      dragRotate: false,
      keyboard: false,
      maxPitch: 0,
      fadeDuration: 0,
      maxZoom: 17,
    })
    view.touchZoomRotate.disableRotation()
    view.addControl(new AttributionControl({ compact: false }), 'bottom-right')
    this.view = view
    this.coasts = new Coasts(view)
    this.furniture = new Furniture(view)
    this.markers = new PlaceMarkers(view)
    view.once('style.load', () => {
      this.ready = true
      this.draw()
    })
    view.on('move', () => {
      this.furniture.place()
    })
    view.on('moveend', () => {
      this.drawFurniture()
    })
    view.on('resize', () => {
      this.drawFurniture()
    })
    this.followPointer()
    this.followKeys()
    this.markers.place(props.runs, this.places)
  }

  /** Draws other runs, or the same ones flown anew. */
  show(props: FlightMapProps): void {
    const before = { keys: keysOf(this.props), frame: this.frame.key }
    this.props = props
    const frame = frameOf(props)
    if (frame.key !== before.frame) this.frame = frame
    this.places = placesOf(props, this.frame)
    this.markers.place(props.runs, this.places)
    if (!this.ready) return
    this.draw()
    if (keysOf(props) !== before.keys || frame.key !== before.frame || !this.inView()) this.fit()
  }

  /** Moves the view to the whole flight. */
  fit(): void {
    const options = { padding: MARGIN, maxZoom: 13, animate: false }
    this.view.fitBounds(boundsOf(this.places), options)
  }

  zoom(steps: number): void {
    this.view.zoomTo(this.view.getZoom() + steps, { duration: calm() ? 0 : 200 })
  }

  /** Takes the colours of the scheme that is on now. */
  recolour(): void {
    if (!this.ready) return
    const { layers } = mapStyle(this.view.getContainer())
    for (const { id, paint } of layers) {
      for (const [name, value] of Object.entries(paint ?? {})) {
        this.view.setPaintProperty(id, name as 'fill-color', value as string)
      }
    }
    this.draw()
  }

  /** Graticule, its labels and the distance scale, after a move or a change of units. */
  drawFurniture(): void {
    if (!this.ready) return
    this.coasts.refresh(this.frame)
    this.furniture.draw(this.frame)
  }

  close(): void {
    for (const undo of this.undo) undo()
    this.coasts.close()
    this.view.remove()
  }

  private draw(): void {
    const { runs } = this.props
    const box = this.view.getContainer()
    void this.view.getSource<GeoJSONSource>('tracks')?.setData(trackLines(runs, this.frame, box))
    this.drawFurniture()
  }

  private inView(): boolean {
    const bounds = this.view.getBounds()
    return this.places.every((places) => places.every((place) => bounds.contains(place)))
  }

  private followPointer(): void {
    const point = ({ point: { x, y } }: { point: { x: number; y: number } }) => {
      const [first] = this.props.runs
      const moment = nearestMoment(first.track, this.places[0], { x, y, reach: REACH }, (place) =>
        this.view.project(place),
      )
      if (moment !== null) cursorElapsed.value = moment
    }
    this.view.on('mousemove', point)
    this.view.on('touchstart', point)
    this.view.on('click', point)
    this.view.on('mouseout', () => (cursorElapsed.value = null))
  }

  private followKeys(): void {
    const canvas = this.view.getCanvas()
    this.undo.push(
      momentKeys(canvas, 'Ground track', () => this.props.runs[0].track),
      this.markers.followMoment(
        () => this.props.runs[0].track,
        () => this.frame,
      ),
    )
    canvas.addEventListener('keydown', (event) => {
      const pan = event.shiftKey ? PANS[event.key] : undefined
      if (pan) this.view.panBy(pan, { duration: 0 })
      else if (event.key === '+' || event.key === '=') this.zoom(1)
      else if (event.key === '-') this.zoom(-1)
      else if (event.key === '0') this.fit()
      else return
      event.preventDefault()
    })
  }
}

/** Shift and an arrow move the map by so many CSS pixels. */
const PANS: Partial<Record<string, [number, number]>> = {
  ArrowLeft: [-100, 0],
  ArrowRight: [100, 0],
  ArrowUp: [0, -100],
  ArrowDown: [0, 100],
}

function calm(): boolean {
  return matchMedia('(prefers-reduced-motion: reduce)').matches
}

function keysOf({ runs }: FlightMapProps): string {
  return runs.map(({ key }) => key).join(' ')
}

function frameOf({ runs }: FlightMapProps): MapFrame {
  return frameFor(runs.flatMap(({ track }) => track))
}

function placesOf({ runs }: FlightMapProps, frame: MapFrame): MapPlace[][] {
  return runs.map(({ track }) => trackPlaces(track, frame))
}

/** West, south, east, north; never so small that a flight in still air fills the map with one point. */
function boundsOf(tracks: readonly MapPlace[][]): [number, number, number, number] {
  const places = tracks.flat()
  const xs = places.map(([x]) => x)
  const ys = places.map(([, y]) => y)
  const least = 0.02
  return [
    Math.min(...xs) - least,
    Math.min(...ys) - least,
    Math.max(...xs) + least,
    Math.max(...ys) + least,
  ]
}
