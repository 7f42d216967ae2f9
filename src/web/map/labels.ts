import { type Map as MapView, Marker } from 'maplibre-gl'
import { type MapPlace } from './frame.ts'

/** Words that stand at places of the map. */
export class Labels {
  private readonly view: MapView
  private markers: Marker[] = []

  constructor(view: MapView) {
    this.view = view
  }

  /** Puts these in place of those before. */
  show(labels: readonly { text: string; place: MapPlace; kind: string }[]): void {
    for (const marker of this.markers) marker.remove()
    this.markers = labels.map(({ text, place, kind }) => {
      const element = document.createElement('div')
      element.className = `map-label ${kind}`
      element.textContent = text
      return new Marker({ element, anchor: 'bottom' }).setLngLat(place).addTo(this.view)
    })
  }
}
