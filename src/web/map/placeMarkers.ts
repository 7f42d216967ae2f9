import { effect, signal } from '@preact/signals'
import { type Map as MapView, Marker } from 'maplibre-gl'
import { cursorElapsed } from '../cursor.ts'
import { runToken } from '../pictures/ink.ts'
import { marks, type Mark } from '../pictures/marks.ts'
import { burstIndex, momentAt } from '../pictures/moment.ts'
import { type ShownRun, type TrackRow } from '../pictures/shownRun.ts'
import { type MapFrame, type MapPlace } from './frame.ts'

/** The symbols of release, burst and landing on the map, and the marker of the moment. */
export class PlaceMarkers {
  private readonly view: MapView
  private readonly moment: Marker
  private markers: Record<Mark, Marker>[] = []
  /** Counts what was placed, so that the moment's marker follows a flight that changes under it */
  private readonly placed = signal(0)

  constructor(view: MapView) {
    this.view = view
    const element = document.createElement('div')
    element.className = 'map-moment'
    this.moment = new Marker({ element })
  }

  /** Puts the symbols of runs to their places on the map; `places` hold those of each run's rows. */
  place(runs: readonly ShownRun[], places: readonly MapPlace[][]): void {
    if (this.markers.length !== runs.length) this.make(runs.length)
    for (const [index, { track }] of runs.entries()) {
      const { release, burst, landing } = this.markers[index]
      release.setLngLat(places[index][0])
      burst.setLngLat(places[index][burstIndex(track)])
      landing.setLngLat(places[index][track.length - 1])
    }
    this.placed.value += 1
  }

  private make(count: number): void {
    for (const marker of this.markers.flatMap((marks) => Object.values(marks))) marker.remove()
    // The first run's symbols lie on top.
    const made = Array.from({ length: count }, (_, index) => count - 1 - index).map((index) => ({
      release: this.mark('release', index),
      burst: this.mark('burst', index),
      landing: this.mark('landing', index, count > 1 ? String(index + 1) : ''),
    }))
    this.markers = made.reverse()
  }

  /** Keeps the marker of the moment where the balloon is then. Returns what stops it. */
  followMoment(track: () => readonly TrackRow[], frame: () => MapFrame): () => void {
    return effect(() => {
      const elapsed = this.placed.value >= 0 ? cursorElapsed.value : null
      if (elapsed === null) {
        this.moment.remove()
        return
      }
      const { latitudeDeg, longitudeDeg } = momentAt(track(), elapsed)
      this.moment.setLngLat(frame().toMap(latitudeDeg, longitudeDeg)).addTo(this.view)
    })
  }

  private mark(mark: Mark, index: number, tag = ''): Marker {
    const element = document.createElement('div')
    element.className = index === 0 ? 'map-mark' : 'map-mark other'
    element.style.color = `var(${runToken(index, mark === 'landing' ? 'descent' : 'ascent')})`
    element.innerHTML = `<svg viewBox="-12 -12 24 24"><path class="edge" d="${marks[mark]}"/><path d="${marks[mark]}"/></svg>`
    element.dataset.mark = mark
    if (tag) {
      const number = document.createElement('span')
      number.textContent = tag
      element.append(number)
    }
    return new Marker({ element }).setLngLat([0, 0]).addTo(this.view)
  }
}
