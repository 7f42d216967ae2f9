import { once } from 'node:events'
import { mkdtempSync, writeFileSync } from 'node:fs'
import { createServer } from 'node:http'
import { type AddressInfo } from 'node:net'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { type Page } from 'playwright-core'
import { afterAll, expect, test } from 'vitest'
import { plainPng, pmtilesFile } from '../service/pmtilesFile.ts'
import { inChromium } from './chromium.ts'

/** A colour that no scheme of the page has. */
const TILE: [number, number, number] = [150, 40, 200]

inChromium('the map on its own', (room) => {
  test('draws coasts, borders and graticule, and no request leaves the service', async () => {
    const { page, foreign, complaints } = await room.open(await runPath(room.server.address))
    const asked: string[] = []
    page.on('request', (request) => asked.push(new URL(request.url()).pathname))
    await mapDrawn(page)
    // Land under the whole flight; a tile's colour nowhere.
    expect(await colourOfMap(page)).toEqual([246, 242, 230])
    expect(await page.locator('.graticule-labels .meridian').count()).toBeGreaterThan(1)
    expect(await page.locator('.graticule-labels .parallel').count()).toBeGreaterThan(1)
    expect(await page.locator('.maplibregl-ctrl-attrib').textContent()).toContain('Natural Earth')
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test('the labels of the graticule stand where the service says the places are', async () => {
    const { address } = room.server
    const { page } = await room.open(await runPath(address))
    await mapDrawn(page)
    const landing = await demoLanding(address)
    const mark = await middleOf(page, '.map-mark[data-mark="landing"]')
    // Two labelled meridians tell the longitude of a place between them: Mercator's are evenly spaced.
    const meridians = await labelled(page, 'meridian')
    const [a, b] = [meridians[0], meridians[meridians.length - 1]]
    const longitude = a.degrees + ((mark.x - a.x) / (b.x - a.x)) * (b.degrees - a.degrees)
    expect(Math.abs(longitude - landing.longitudeDeg)).toBeLessThan(0.01)
    const parallels = (await labelled(page, 'parallel')).sort((p, q) => p.y - q.y)
    const [above, below] = [parallels[0], parallels[parallels.length - 1]]
    const latitude =
      above.degrees + ((mark.y - above.y) / (below.y - above.y)) * (below.degrees - above.degrees)
    expect(Math.abs(latitude - landing.latitudeDeg)).toBeLessThan(0.01)
  })

  test('is moved, zoomed and fitted by keys', async () => {
    const { page } = await room.open(await runPath(room.server.address))
    await mapDrawn(page)
    const canvas = page.getByRole('slider', { name: 'Ground track' })
    const scale = async () => {
      const bar = page.locator('.distance-scale')
      return `${await bar.textContent()} in ${Math.round((await bar.boundingBox())?.width ?? 0)} px`
    }
    const burst = () => middleOf(page, '.map-mark[data-mark="burst"]')
    const [before, fitted] = [await burst(), await scale()]
    await canvas.press('Shift+ArrowRight')
    await expect.poll(async () => Math.round(before.x - (await burst()).x)).toBe(100)
    for (let i = 0; i < 3; i++) await canvas.press('+')
    await expect.poll(scale).not.toBe(fitted)
    await canvas.press('0')
    await expect.poll(scale).toBe(fitted)
    await expect.poll(async () => Math.round((await burst()).x - before.x)).toBe(0)
    await page.getByRole('button', { name: 'Zoom out' }).click()
    await expect.poll(scale).not.toBe(fitted)
    await page.getByRole('button', { name: 'Whole flight' }).click()
    await expect.poll(scale).toBe(fitted)
  })

  test('takes the colours of the scheme, also when that changes', async () => {
    const { page } = await room.open(await runPath(room.server.address), { colorScheme: 'dark' })
    await mapDrawn(page)
    expect(await colourOfMap(page)).toEqual([36, 48, 57])
    await page.emulateMedia({ colorScheme: 'light' })
    await expect.poll(() => colourOfMap(page)).toEqual([246, 242, 230])
  })
})

const tile = plainPng(256, TILE)
const asked: string[] = []
const tileServer = createServer((request, response) => {
  asked.push(request.url ?? '')
  response.writeHead(200, { 'content-type': 'image/png', 'access-control-allow-origin': '*' })
  response.end(tile)
})
tileServer.listen(0, '127.0.0.1')
await once(tileServer, 'listening')
const tileOrigin = `http://127.0.0.1:${(tileServer.address() as AddressInfo).port}`
afterAll(() => {
  tileServer.close()
})

inChromium(
  'the map on tiles of an XYZ source',
  (room) => {
    test('draws them, names whose they are, and loads from there alone', async () => {
      const { page, foreign, complaints } = await room.open(await runPath(room.server.address))
      await mapDrawn(page)
      await expect.poll(() => colourOfMap(page), { timeout: 20_000 }).toEqual(TILE)
      expect(asked.length).toBeGreaterThan(0)
      for (const path of asked) expect(path).toMatch(/^\/relief\/\d+\/\d+\/\d+\.png\?key=invented$/)
      const words = page.locator('.maplibregl-ctrl-attrib')
      // Text, not markup: what an operator writes cannot change the page.
      expect(await words.textContent()).toContain('Invented <b>relief</b> & co')
      expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
    })
  },
  {
    TILES: `${tileOrigin}/relief/{z}/{x}/{y}.png?key=invented`,
    TILES_ATTRIBUTION: 'Invented <b>relief</b> & co',
  },
  [tileOrigin],
)

const pmtiles = join(mkdtempSync(join(tmpdir(), 'driftbook-tiles-')), 'relief.pmtiles')
writeFileSync(pmtiles, pmtilesFile(tile, { maxZoom: 3 }))

inChromium(
  'the map on tiles of a PMTiles file',
  (room) => {
    test('draws them, read from the service by ranges', async () => {
      const { page, foreign, complaints } = await room.open(await runPath(room.server.address))
      const statuses: number[] = []
      page.on('response', (response) => {
        if (response.url().endsWith('/v1/map/tiles.pmtiles')) statuses.push(response.status())
      })
      await mapDrawn(page)
      await expect.poll(() => colourOfMap(page), { timeout: 20_000 }).toEqual(TILE)
      expect(new Set(statuses)).toEqual(new Set([206]))
      expect(await page.locator('.maplibregl-ctrl-attrib').textContent()).toContain('Invented file')
      expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
    })
  },
  { TILES: pmtiles, TILES_ATTRIBUTION: 'Invented file' },
)

interface DemoFlight {
  title: string
  latestRun: { id: string; landing: { latitudeDeg: number; longitudeDeg: number } }
}

async function demoFlight(address: string): Promise<DemoFlight> {
  const answer = await fetch(`${address}/v1/flights`)
  const [flight] = ((await answer.json()) as { items: DemoFlight[] }).items
  return flight
}

async function runPath(address: string): Promise<string> {
  return `#/runs/${(await demoFlight(address)).latestRun.id}`
}

async function demoLanding(address: string) {
  return (await demoFlight(address)).latestRun.landing
}

async function mapDrawn(page: Page): Promise<void> {
  await page.locator('.flight-map .chart[data-coasts="drawn"]').waitFor({ timeout: 30_000 })
}

async function middleOf(page: Page, selector: string): Promise<{ x: number; y: number }> {
  const box = await page.locator(selector).boundingBox()
  if (!box) throw new Error(`no ${selector}`)
  return { x: box.x + box.width / 2, y: box.y + box.height / 2 }
}

async function labelled(page: Page, kind: 'meridian' | 'parallel') {
  const labels = await page.locator(`.graticule-labels .${kind}`).all()
  return Promise.all(
    labels.map(async (label) => {
      const box = await label.boundingBox()
      const degrees = parseFloat((await label.textContent()) ?? '')
      if (!box) throw new Error('no label')
      return { degrees, x: box.x + box.width / 2, y: box.y + box.height / 2 }
    }),
  )
}

/** The colour that the map has most, of the pixels on a coarse lattice: red, green, blue. */
async function colourOfMap(page: Page): Promise<number[]> {
  const picture = await page.locator('.flight-map canvas').screenshot()
  return page.evaluate<number[]>(`(async () => {
    const bytes = Uint8Array.from(atob('${picture.toString('base64')}'), (c) => c.charCodeAt(0))
    const image = await createImageBitmap(new Blob([bytes], { type: 'image/png' }))
    const canvas = new OffscreenCanvas(image.width, image.height).getContext('2d')
    canvas.drawImage(image, 0, 0)
    const { data } = canvas.getImageData(0, 0, image.width, image.height)
    const counts = new Map()
    for (let x = 3; x < image.width; x += 7) {
      for (let y = 3; y < image.height; y += 7) {
        const at = 4 * (y * image.width + x)
        const colour = data.slice(at, at + 3).join()
        counts.set(colour, (counts.get(colour) ?? 0) + 1)
      }
    }
    return [...counts].sort((a, b) => b[1] - a[1])[0][0].split(',').map(Number)
  })()`)
}
