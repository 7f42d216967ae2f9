import { spawnSync } from 'node:child_process'
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { FetchSource, PMTiles } from 'pmtiles'
import { afterAll, expect, test } from 'vitest'
import { startService } from './harness.ts'
import { plainPng, pmtilesFile, tileTypes } from './pmtilesFile.ts'
import { end, startServer } from './startedServer.ts'

const MAIN = new URL('../../dist/main.js', import.meta.url).pathname
const folder = mkdtempSync(join(tmpdir(), 'driftbook-map-'))
afterAll(() => {
  rmSync(folder, { recursive: true })
})

function write(name: string, bytes: Buffer): string {
  const file = join(folder, name)
  writeFileSync(file, bytes)
  return file
}

const policyOf = (headers: Record<string, string>) =>
  new Map(
    headers['content-security-policy'].split(';').map((directive) => {
      const [name, ...sources] = directive.trim().split(' ')
      return [name, sources.join(' ')]
    }),
  )

test('no source named: no tiles, and pages load nothing from elsewhere', async () => {
  const { http } = await startService()
  const answer = await http.get('/v1/map').expect(200)
  expect(answer.body).toEqual({ tiles: null })
  const sources = [...policyOf(answer.headers).values()].join(' ').split(' ')
  expect(new Set(sources)).toEqual(
    new Set(["'self'", "'none'", "'unsafe-inline'", 'data:', 'blob:']),
  )
  await http.get('/v1/map/tiles.pmtiles').expect(404)
})

test('an XYZ template is told to the page, whose policy gains its origin and nothing else', async () => {
  const template = 'https://tiles.example:8443/relief/{z}/{x}/{y}.png'
  const { http } = await startService({
    tiles: { kind: 'xyz', template, attribution: 'Invented tiles' },
  })
  const answer = await http.get('/v1/map').expect(200)
  expect(answer.body).toEqual({
    tiles: { kind: 'xyz', url: template, attribution: 'Invented tiles' },
  })
  const policy = policyOf(answer.headers)
  expect(policy.get('img-src')).toBe("'self' data: blob: https://tiles.example:8443")
  expect(policy.get('connect-src')).toBe("'self' https://tiles.example:8443")
  expect(policy.get('default-src')).toBe("'self'")
  expect(answer.headers['content-security-policy'].split('tiles.example')).toHaveLength(3)
})

test('a PMTiles file is served by ranges, as the format’s own reader asks for them', async () => {
  const tile = plainPng(256, [40, 120, 90])
  const file = write('relief.pmtiles', pmtilesFile(tile, { maxZoom: 3 }))
  const server = await startServer({
    DATABASE_FILE: join(folder, 'a.sqlite'),
    TILES: file,
    TILES_ATTRIBUTION: 'Invented relief',
  })
  const answer = await fetch(`${server.address}/v1/map`)
  expect(await answer.json()).toEqual({
    tiles: {
      kind: 'pmtiles',
      url: '/v1/map/tiles.pmtiles',
      attribution: 'Invented relief',
      minZoom: 0,
      maxZoom: 3,
      bounds: [-180, -85, 180, 85],
    },
  })

  const url = `${server.address}/v1/map/tiles.pmtiles`
  const range = await fetch(url, { headers: { range: 'bytes=0-6' } })
  expect(range.status).toBe(206)
  expect(await range.text()).toBe('PMTiles')

  const reader = new PMTiles(new FetchSource(url))
  const read = await reader.getZxy(3, 5, 2)
  expect(tile.equals(new Uint8Array(read?.data ?? new ArrayBuffer(0)))).toBe(true)
  expect(await reader.getZxy(4, 5, 2)).toBeUndefined()
  await end(server, 'SIGTERM')
})

test.each([
  ['a missing file', () => join(folder, 'missing.pmtiles')],
  ['junk', () => write('junk.pmtiles', Buffer.alloc(500, 'junk'))],
  ['a cut-off file', () => write('cut.pmtiles', Buffer.from('PMTiles'))],
  [
    'vector tiles',
    () =>
      write('vector.pmtiles', pmtilesFile(Buffer.of(1), { maxZoom: 0, type: tileTypes.vector })),
  ],
  ['no template', () => 'https://tiles.example/'],
])('%s as TILES stops the start, by name', (_what, tiles) => {
  const { status, stderr } = spawnSync(process.execPath, [MAIN], {
    env: { ...process.env, PORT: '0', DATABASE_FILE: join(folder, 'b.sqlite'), TILES: tiles() },
    encoding: 'utf8',
    timeout: 20_000,
  })
  expect(status).toBe(1)
  expect(stderr).toMatch(/TILES=/)
})
