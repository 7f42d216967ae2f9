import { addProtocol, type Map as MapView, type RasterSourceSpecification } from 'maplibre-gl'
import { type MapAnswer } from '../../service/schemas/map.ts'
import { call } from '../api/client.ts'

type Tiles = NonNullable<MapAnswer['tiles']>

let asked: Promise<MapAnswer['tiles']> | null = null

/** Lays the operator's tiles under graticule and track, where the operator named some. */
export async function layTiles(view: MapView, closed: () => boolean): Promise<void> {
  asked ??= call<MapAnswer>('GET', '/v1/map').then(({ tiles }) => tiles)
  const tiles = await asked.catch(() => {
    asked = null
    return null
  })
  if (!tiles) return
  const source =
    tiles.kind === 'xyz' ? { tiles: [tiles.url] } : { url: await overPmtiles(tiles.url) }
  if (closed()) return
  view.addSource('tiles', { ...sourceOf(tiles), ...source })
  view.addLayer({ id: 'tiles', type: 'raster', source: 'tiles' }, 'graticule')
}

function sourceOf({ attribution, minZoom, maxZoom, bounds }: Tiles): RasterSourceSpecification {
  const words = document.createElement('span')
  words.textContent = attribution
  return {
    type: 'raster',
    tileSize: 256,
    attribution: words.innerHTML,
    ...(minZoom === undefined ? {} : { minzoom: minZoom }),
    ...(maxZoom === undefined ? {} : { maxzoom: maxZoom }),
    ...(bounds ? { bounds: bounds as [number, number, number, number] } : {}),
  }
}

let protocol: Promise<void> | null = null

/** The address of a PMTiles file for the map library; its reader is fetched only for this. */
async function overPmtiles(path: string): Promise<string> {
  protocol ??= import('pmtiles').then(({ Protocol }) => {
    addProtocol('pmtiles', new Protocol().tile)
  })
  await protocol
  return `pmtiles://${new URL(path, location.href).href}`
}
