import { type Locator, type Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { flightRequest, steadyWind } from '../service/harness.ts'
import { expectAccessible, expectNoSidewaysScrolling, inChromium } from './chromium.ts'

interface Row {
  elapsedS: number
  altitudeM: number
  latitudeDeg: number
  longitudeDeg: number
}

inChromium('pictures', (room) => {
  test('pointing at any picture moves the marker in all three, and the readout', async () => {
    const { id, rows } = await storedRun(room.server.address)
    const { page, foreign, complaints } = await room.open(`#/runs/${id}`)
    await mapDrawn(page)
    expect(await markers(page)).toEqual([false, false, false])

    // A third along the chart of heights, which begins 3 % before the release and ends 4 % after landing.
    await pointAt(page.locator('.of-height .u-over'), 1 / 3, 0.5)
    expect(await markers(page)).toEqual([true, true, true])
    await expectReadoutOnTrack(page, rows)
    const last = rows[rows.length - 1].elapsedS
    expect(Math.abs((await shownElapsed(page)) - last * (1.07 / 3 - 0.03))).toBeLessThan(
      0.01 * last,
    )

    // Half up the chart of winds: on the way up, near half the burst height.
    await pointAt(page.locator('.of-wind .u-over'), 0.5, 0.5)
    expect(await markers(page)).toEqual([true, true, true])
    const readout = await expectReadoutOnTrack(page, rows)
    expect(readout).toContain('ascent')
    const highest = Math.max(...rows.map(({ altitudeM }) => altitudeM))
    expect(Math.abs((await shownHeight(page)) - highest / 2)).toBeLessThan(0.05 * highest)

    // The symbol of the burst on the map.
    const burst = await page.locator('.map-mark[data-mark="burst"]').boundingBox()
    if (!burst) throw new Error('no burst on the map')
    await page.mouse.move(burst.x + burst.width / 2, burst.y + burst.height / 2)
    expect(await markers(page)).toEqual([true, true, true])
    await expectReadoutOnTrack(page, rows)
    expect(Math.abs((await shownHeight(page)) - highest)).toBeLessThan(0.03 * highest)

    await page.mouse.move(2, 2)
    await expect.poll(() => markers(page)).toEqual([false, false, false])
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test.each(['Height against time', 'Wind against height', 'Ground track'])(
    'keys over “%s” do the same',
    async (label) => {
      const { id, rows } = await storedRun(room.server.address)
      const { page } = await room.open(`#/runs/${id}`)
      await mapDrawn(page)
      const slider = page.getByRole('slider', { name: label })
      await tabTo(page, slider)
      await page.keyboard.press('Home')
      expect(await shownElapsed(page)).toBe(0)
      for (let i = 0; i < 4; i++) await page.keyboard.press('PageUp')
      for (let i = 0; i < 4; i++) await page.keyboard.press('ArrowRight')
      await page.keyboard.press('ArrowLeft')
      expect(await markers(page)).toEqual([true, true, true])
      await expectReadoutOnTrack(page, rows)
      const last = rows[rows.length - 1].elapsedS
      expect(Math.abs((await shownElapsed(page)) - (43 / 200) * last)).toBeLessThan(1)
      expect(await slider.getAttribute('aria-valuetext')).toContain(
        `height ${await readout(page, 'Height')}`,
      )

      await page.keyboard.press('b')
      expect(await readout(page, 'After release')).toContain('burst')
      await page.keyboard.press('End')
      expect(await readout(page, 'After release')).toContain('landing')
      await page.keyboard.press('Escape')
      expect(await markers(page)).toEqual([false, false, false])
    },
  )

  test('a finger does too, and what it pointed at stays', async () => {
    const { id, rows } = await storedRun(room.server.address)
    const { page } = await room.open(`#/runs/${id}`, {
      hasTouch: true,
      viewport: { width: 360, height: 1800 },
    })
    await mapDrawn(page)
    const chart = await page.locator('.of-height .u-over').boundingBox()
    if (!chart) throw new Error('no chart')
    await page.touchscreen.tap(chart.x + chart.width / 2, chart.y + chart.height / 2)
    await expect.poll(() => markers(page)).toEqual([true, true, true])
    await expectReadoutOnTrack(page, rows)
  })

  test('the readout follows the switch of units', async () => {
    const { id } = await storedRun(room.server.address)
    const { page } = await room.open(`#/runs/${id}`)
    await mapDrawn(page)
    await page.getByRole('slider', { name: 'Height against time' }).press('b')
    const metres = await shownHeight(page)
    await page.getByRole('switch', { name: 'Feet and knots' }).click()
    await page.getByRole('slider', { name: 'Height against time' }).press('b')
    // The international foot, 0.3048 m.
    expect(Math.abs((await shownHeight(page)) * 0.3048 - metres)).toBeLessThan(1)
    expect(await readout(page, 'Height')).toMatch(/ ft$/)
    expect(await readout(page, 'Wind')).toMatch(/ kt from \d{3}°$/)
    await expect.poll(() => page.locator('.distance-scale').textContent()).toMatch(/ NM$/)
  })

  test.each([
    ['across the antimeridian', 52, 179.8, 270],
    ['over the north pole', 89.6, 30, 210],
    ['near the south pole', -88, -120, 0],
  ])('a flight %s is drawn whole', async (_what, latitudeDeg, longitudeDeg, windFromDeg) => {
    const { address } = room.server
    const { id, rows } = await flyThere(address, { latitudeDeg, longitudeDeg }, windFromDeg)
    const { page, complaints } = await room.open(`#/runs/${id}`)
    await mapDrawn(page)
    const map = await page.locator('.flight-map .chart').boundingBox()
    if (!map) throw new Error('no map')
    const places = await Promise.all(
      ['release', 'burst', 'landing'].map((mark) =>
        page.locator(`.map-mark[data-mark="${mark}"]`).boundingBox(),
      ),
    )
    for (const place of places) {
      expect(place?.x).toBeGreaterThan(map.x)
      expect(place?.y).toBeGreaterThan(map.y)
      expect((place?.x ?? Infinity) + 24).toBeLessThan(map.x + map.width)
      expect((place?.y ?? Infinity) + 24).toBeLessThan(map.y + map.height)
    }
    // Release and landing are apart on the screen as they are by the scale.
    const [release, , landing] = places
    if (!release || !landing) throw new Error('places are missing')
    const pixels = Math.hypot(landing.x - release.x, landing.y - release.y)
    const distance = await landingDistance(address, id)
    const shown = (pixels * (await metresOfScale(page))) / distance
    expect(shown).toBeGreaterThan(0.97)
    expect(shown).toBeLessThan(1.03)

    const slider = page.getByRole('slider', { name: 'Ground track' })
    await slider.press('End')
    for (let i = 0; i < 3; i++) await slider.press('PageDown')
    await expectReadoutOnTrack(page, rows)
    const moment = await page.locator('.map-moment').boundingBox()
    expect(moment && moment.x > map.x && moment.x < map.x + map.width).toBe(true)
    expect(complaints).toEqual([])
  })

  test.each([
    ['light', 1280],
    ['dark', 1280],
    ['light', 360],
    ['dark', 360],
  ] as const)('nothing for axe to find: %s, %d px', async (colorScheme, width) => {
    const { id } = await storedRun(room.server.address)
    const { page } = await room.open(`#/runs/${id}`, {
      colorScheme,
      viewport: { width, height: 900 },
    })
    await mapDrawn(page)
    await page.getByRole('slider', { name: 'Height against time' }).press('b')
    await expectAccessible(page)
    await expectNoSidewaysScrolling(page)
  })
})

/** The run of the demo flight, with its track. */
async function storedRun(address: string): Promise<{ id: string; rows: Row[] }> {
  const flights = (await json(`${address}/v1/flights?limit=200`)) as {
    items: { title: string; latestRun: { id: string } }[]
  }
  const demo = flights.items.find(({ title }) => title.startsWith('Invented demo'))
  if (!demo) throw new Error('no demo flight')
  return { id: demo.latestRun.id, rows: await rowsOf(address, demo.latestRun.id) }
}

/** A flight from a place in one steady wind of 25 m/s. */
async function flyThere(
  address: string,
  place: { latitudeDeg: number; longitudeDeg: number },
  windFromDeg: number,
) {
  const { profiles } = (await json(`${address}/v1/profiles`, steadyWind(windFromDeg, 25))) as {
    profiles: { id: string }[]
  }
  const { run } = (await json(
    `${address}/v1/flights`,
    flightRequest({
      launch: { ...place, altitudeM: 20, time: '2026-12-05T09:00:00Z' },
      air: { kind: 'profile', id: profiles[0].id },
    }),
  )) as { run: { id: string } }
  return { id: run.id, rows: await rowsOf(address, run.id) }
}

async function rowsOf(address: string, id: string): Promise<Row[]> {
  const track = (await json(`${address}/v1/runs/${id}/track?format=json`)) as { points: Row[] }
  return track.points
}

async function landingDistance(address: string, id: string): Promise<number> {
  const run = (await json(`${address}/v1/runs/${id}`)) as { landing: { distanceM: number } }
  return run.landing.distanceM
}

async function json(url: string, body?: unknown): Promise<unknown> {
  const answer = await fetch(
    url,
    body === undefined
      ? {}
      : {
          method: 'POST',
          headers: { 'content-type': 'application/json' },
          body: JSON.stringify(body),
        },
  )
  if (!answer.ok) throw new Error(await answer.text())
  return answer.json()
}

async function mapDrawn(page: Page): Promise<void> {
  await page.locator('.flight-map .chart[data-coasts="drawn"]').waitFor({ timeout: 30_000 })
}

/** Whether the marker of the moment is seen on height, wind and map. */
async function markers(page: Page): Promise<boolean[]> {
  return Promise.all(
    ['.of-height .moment-marker', '.of-wind .moment-marker', '.map-moment'].map((marker) =>
      page.locator(marker).isVisible(),
    ),
  )
}

async function pointAt(element: Locator, across: number, down: number): Promise<void> {
  const box = await element.boundingBox()
  if (!box) throw new Error('nothing to point at')
  await element.hover({ position: { x: box.width * across, y: box.height * down } })
}

async function tabTo(page: Page, element: Locator): Promise<void> {
  for (let i = 0; i < 40; i++) {
    await page.keyboard.press('Tab')
    if (await element.and(page.locator(':focus')).count()) return
  }
  throw new Error('Tab does not reach it')
}

async function readout(page: Page, name: string): Promise<string> {
  const value = page.locator('.readout dl > div').filter({ hasText: name }).locator('dd')
  return (await value.first().textContent()) ?? ''
}

async function shownElapsed(page: Page): Promise<number> {
  const [hours, minutes, seconds] = (await readout(page, 'After release'))
    .split(',')[0]
    .split(':')
    .map(Number)
  return hours * 3600 + minutes * 60 + seconds
}

async function shownHeight(page: Page): Promise<number> {
  return numberIn(await readout(page, 'Height'))
}

/** A number with narrow spaces between its thousands. */
function numberIn(text: string): number {
  return parseFloat(text.replaceAll('\u202f', '').replace('−', '-'))
}

/** Fails unless height and position are those of the service's track at the shown second. */
async function expectReadoutOnTrack(page: Page, rows: readonly Row[]): Promise<string> {
  const elapsed = await shownElapsed(page)
  const next = Math.max(
    1,
    rows.findIndex((row) => row.elapsedS >= elapsed),
  )
  const [from, to] = [rows[next - 1], rows[next]]
  const share = (elapsed - from.elapsedS) / (to.elapsedS - from.elapsedS)
  // Half a second of rising or falling is what the rounding of the time may hide, at most 60 m/s.
  const altitude = from.altitudeM + share * (to.altitudeM - from.altitudeM)
  const speed = Math.abs((to.altitudeM - from.altitudeM) / (to.elapsedS - from.elapsedS))
  expect(Math.abs((await shownHeight(page)) - altitude)).toBeLessThan(0.51 * speed + 2)

  const position = await readout(page, 'Position')
  const [, north, ns, east, ew] = /^([\d.]+)°\s([NS]), ([\d.]+)°\s([EW])$/.exec(position) ?? []
  const latitude = Number(north) * (ns === 'S' ? -1 : 1)
  const longitude = Number(east) * (ew === 'W' ? -1 : 1)
  const [a, b, shown] = [from, to, { latitudeDeg: latitude, longitudeDeg: longitude }].map(unit)
  const between = a.map((value, axis) => value + share * (b[axis] - value))
  const length = Math.hypot(...between)
  const off = Math.hypot(...between.map((value, axis) => value / length - shown[axis]))
  // 0.0003° of a great circle, 33 m: half a second of a strong wind and the rounding of the degrees.
  expect((off * 180) / Math.PI).toBeLessThan(0.0004)
  return readout(page, 'After release')
}

/** The direction of a place from the earth's centre. */
function unit({ latitudeDeg, longitudeDeg }: Pick<Row, 'latitudeDeg' | 'longitudeDeg'>): number[] {
  const [phi, lambda] = [latitudeDeg, longitudeDeg].map((degrees) => (degrees * Math.PI) / 180)
  return [Math.cos(phi) * Math.cos(lambda), Math.cos(phi) * Math.sin(lambda), Math.sin(phi)]
}

/** Metres a pixel, by the distance scale. */
async function metresOfScale(page: Page): Promise<number> {
  const scale = page.locator('.distance-scale')
  const width = (await scale.boundingBox())?.width ?? NaN
  return (numberIn((await scale.textContent()) ?? '') * 1000) / width
}
