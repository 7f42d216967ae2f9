import type { GeoJSON, MultiPolygon, Polygon } from 'geojson'
import { AttributionControl, type GeoJSONSource, Map as MapView, setWorkerUrl } from 'maplibre-gl'
import 'maplibre-gl/dist/maplibre-gl.css'
import workerUrl from 'maplibre-gl/dist/maplibre-gl-worker.mjs?url'
import { cursorElapsed } from '../cursor.ts'
import { momentKeys } from '../pictures/momentKeys.ts'
import { type PicturesProps } from '../pictures/pictures.tsx'
import { AreaPen } from './areaPen.ts'
import { Coasts } from './coasts.ts'
import { frameFor, type MapFrame, type MapPlace } from './frame.ts'
import { Furniture } from './furniture.ts'
import { Labels } from './labels.ts'
import { mapStyle } from './mapStyle.ts'
import { nearestMoment } from './nearestMoment.ts'
import { PlaceMarkers } from './placeMarkers.ts'
import { areaShapes, landingPoints, landingRegions, NOTHING, topOf } from './shapes.ts'
import { layTiles } from './tiles.ts'
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
  private readonly labels: Labels
  readonly pen: AreaPen
  private readonly undo: (() => void)[] = []
  private props: PicturesProps
  private frame: MapFrame
  private places: MapPlace[][]
  private ready = false
  private closed = false

  constructor(box: HTMLElement, props: PicturesProps, onAreaDrawn: (polygon: Polygon) => void) {
    this.props = props
    this.frame = frameOf(props)
    this.places = placesOf(props, this.frame)
    const view = new MapView({
      container: box,
      style: mapStyle(box),
      bounds: this.bounds(),
      fitBoundsOptions: { padding: MARGIN, maxZoom: 13 },
      attributionControl: false,
      pitchWithRotate: false,
      dragRotate: false,
      keyboard: false,
      // One finger scrolls the page past the map, two move the map.
      cooperativeGestures: matchMedia('(pointer: coarse)').matches,
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
    this.labels = new Labels(view)
    this.pen = new AreaPen(view, () => this.frame, onAreaDrawn)
    view.once('style.load', () => {
      this.ready = true
      this.draw()
      this.drawFurniture()
      void this.layTiles()
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
  show(props: PicturesProps): void {
    const before = { keys: keysOf(this.props), cloud: this.props.cloud, frame: this.frame.key }
    this.props = props
    const frame = frameOf(props)
    if (frame.key !== before.frame) this.frame = frame
    this.places = placesOf(props, this.frame)
    this.markers.place(props.runs, this.places)
    if (!this.ready) return
    this.draw()
    const changed =
      keysOf(props) !== before.keys ||
      frame.key !== before.frame ||
      (props.cloud && props.cloud !== before.cloud)
    if (frame.key !== before.frame) {
      this.fitTiles()
      this.drawFurniture()
    }
    if (changed || !this.inView()) this.fit()
  }

  /** Moves the view to the whole flight. */
  fit(): void {
    const options = { padding: MARGIN, maxZoom: 13, animate: false }
    this.view.fitBounds(this.bounds(), options)
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
    this.fitTiles()
    this.draw()
  }

  /** Graticule, its labels and the distance scale, after a move or a change of units. */
  drawFurniture(): void {
    if (!this.ready) return
    this.coasts.refresh(this.frame)
    this.furniture.draw(this.frame)
  }

  close(): void {
    this.closed = true
    for (const undo of this.undo) undo()
    this.coasts.close()
    this.view.remove()
  }

  private draw(): void {
    this.put('tracks', trackLines(this.props.runs, this.frame, this.view.getContainer()))
    this.drawShapes()
  }

  /** The operator's tiles, where there are any: in Mercator's projection, so not on a turned globe. */
  private async layTiles(): Promise<void> {
    await layTiles(this.view, () => this.closed)
    if (!this.closed) this.fitTiles()
  }

  private fitTiles(): void {
    if (!this.view.getLayer('tiles')) return
    const visibility = this.frame.turnedTo ? 'none' : 'visible'
    this.view.setLayoutProperty('tiles', 'visibility', visibility)
    const dark = matchMedia('(prefers-color-scheme: dark)').matches
    this.view.setPaintProperty('tiles', 'raster-brightness-max', dark ? 0.7 : 1)
  }

  private drawShapes(): void {
    const { cloud, areas = [] } = this.props
    const regions = cloud ? landingRegions(cloud, this.frame) : NOTHING
    const places = areaShapes(areas, this.frame)
    this.put('regions', regions)
    this.put('landing-points', cloud ? landingPoints(cloud, this.frame) : NOTHING)
    this.put('areas', places)
    this.labels.show([
      ...regions.features.flatMap(({ geometry, properties }) =>
        labelled(geometry, `${Math.round(100 * Number(properties?.share))} %`, 'share'),
      ),
      ...places.features.flatMap(({ geometry, properties }) =>
        labelled(
          geometry,
          `${String(properties?.name)} (${properties?.wanted ? 'wanted' : 'avoid'})`,
          'area',
        ),
      ),
    ])
  }

  private put(source: string, data: GeoJSON): void {
    void this.view.getSource<GeoJSONSource>(source)?.setData(data)
  }

  /** What the whole flight takes, its landing regions included. */
  private bounds(): [number, number, number, number] {
    const { cloud } = this.props
    const regions = cloud ? landingRegions(cloud, this.frame).features : []
    return boundsOf([
      ...this.places,
      ...regions.flatMap(({ geometry }) => geometry.coordinates.flat() as MapPlace[][]),
    ])
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
    this.view.on('click', (event) => {
      if (this.pen.drawing) this.pen.click([event.lngLat.lng, event.lngLat.lat])
      else point(event)
    })
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
    const box = this.view.getContainer()
    const onKey = (event: KeyboardEvent) => {
      if (event.target !== canvas) return
      // While an area is drawn, the arrows alone move the map under its middle.
      const pan = event.shiftKey || this.pen.drawing ? PANS[event.key] : undefined
      if (this.pen.key(event.key)) event.preventDefault()
      else if (pan) this.view.panBy(pan, { duration: 0 })
      else if (event.key === '+' || event.key === '=') this.zoom(1)
      else if (event.key === '-') this.zoom(-1)
      else if (event.key === '0') this.fit()
      else return
      event.preventDefault()
      event.stopPropagation()
    }
    // Before the canvas's own keys, which move the moment.
    box.addEventListener('keydown', onKey, { capture: true })
    this.undo.push(() => {
      box.removeEventListener('keydown', onKey, { capture: true })
    })
  }
}

function labelled(shape: MultiPolygon, text: string, kind: string) {
  const place = topOf(shape)
  return place ? [{ text, place, kind }] : []
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

function keysOf({ runs }: PicturesProps): string {
  return runs.map(({ key }) => key).join(' ')
}

function frameOf({ runs }: PicturesProps): MapFrame {
  return frameFor(runs.flatMap(({ track }) => track))
}

function placesOf({ runs }: PicturesProps, frame: MapFrame): MapPlace[][] {
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
