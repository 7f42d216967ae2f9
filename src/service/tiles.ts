import { closeSync, openSync, readSync } from 'node:fs'
import { bytesToHeader, TileType } from 'pmtiles'

/** Where the map's background comes from, as the environment names it. */
export type TileSetting =
  /** An XYZ template of raster tiles, http or https, with {z}, {x} and {y} */
  | { kind: 'xyz'; template: string; attribution: string }
  /** A PMTiles file of raster tiles on this machine */
  | { kind: 'pmtiles'; file: string; attribution: string }

/** A tile source that can be served. */
export type TileSource =
  | { kind: 'xyz'; template: string; attribution: string }
  | {
      kind: 'pmtiles'
      file: string
      attribution: string
      minZoom: number
      maxZoom: number
      /** West, south, east, north, degrees */
      bounds: [number, number, number, number]
    }

/** Length of a PMTiles header. PMTiles specification, version 3, section 3. */
const HEADER = 127

const RASTER: readonly TileType[] = [TileType.Png, TileType.Jpeg, TileType.Webp, TileType.Avif]

/**
 * Opens what the environment names.
 * @throws Error that names the variable TILES where the file cannot be read or holds no raster tiles
 */
export function openTiles(setting: TileSetting): TileSource {
  if (setting.kind === 'xyz') return setting
  const fault = (message: string) =>
    new Error(`The environment is malformed. TILES=${JSON.stringify(setting.file)}: ${message}`)
  let header
  try {
    header = bytesToHeader(firstBytes(setting.file))
  } catch (error) {
    throw fault(
      `is no PMTiles file that can be read (${error instanceof Error ? error.message : String(error)})`,
    )
  }
  if (!RASTER.includes(header.tileType)) {
    throw fault('holds no raster tiles (PNG, JPEG, WebP or AVIF); vector tiles are not drawn')
  }
  const { minZoom, maxZoom, minLon, minLat, maxLon, maxLat } = header
  return { ...setting, minZoom, maxZoom, bounds: [minLon, minLat, maxLon, maxLat] }
}

/** The origin that a page must be allowed to load from, beside the service's own. */
export function foreignOrigin(source: TileSource | null): string | null {
  return source?.kind === 'xyz' ? new URL(placeless(source.template)).origin : null
}

/** A template with its places filled, so that it is a URL. */
export function placeless(template: string): string {
  return template.replaceAll(/\{[zxy]\}/g, '0')
}

function firstBytes(file: string): ArrayBuffer {
  const handle = openSync(file, 'r')
  try {
    const bytes = new Uint8Array(HEADER)
    if (readSync(handle, bytes, 0, HEADER, 0) < HEADER) throw new Error('too short')
    return bytes.buffer
  } finally {
    closeSync(handle)
  }
}
