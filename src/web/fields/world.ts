import type { Feature, Position } from 'geojson'
import coarse from 'world-atlas/countries-110m.json?url'
import { type CoastAnswer, type CoastWish } from '../map/coastWorker.ts'

let asked: Promise<string> | null = null

/** The world's land as a path of longitude and latitude (downwards), degrees; drawn in a thread once. */
export function worldPath(): Promise<string> {
  asked ??= new Promise<string>((resolve) => {
    const worker = new Worker(new URL('../map/coastWorker.ts', import.meta.url), { type: 'module' })
    worker.onmessage = ({ data }: MessageEvent<CoastAnswer>) => {
      worker.terminate()
      resolve(pathOf(data.land))
    }
    const url = new URL(coarse, location.href).href
    worker.postMessage({
      number: 1,
      url,
      turnedTo: null,
      extent: null,
    } satisfies CoastWish)
  })
  return asked
}

function pathOf({ geometry }: Feature): string {
  if (geometry.type !== 'MultiPolygon') return ''
  const point = ([x, y]: Position) => `${x.toFixed(2)} ${(-y).toFixed(2)}`
  return geometry.coordinates
    .flat()
    .map((ring) => `M${ring.map(point).join('L')}Z`)
    .join('')
}
