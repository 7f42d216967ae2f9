import { readFileSync } from 'node:fs'
import { XMLParser } from 'fast-xml-parser'
import { expect, test } from 'vitest'
import { type Flight } from '../../src/service/schemas/flight.ts'
import { fixture, flightRequest, steadyWind } from '../service/harness.ts'
import { hoursFromRelease } from '../service/watching.ts'
import { expectAccessible, expectNoSidewaysScrolling, inChromium } from './chromium.ts'
import { tabTo } from './keyboard.ts'

inChromium('book', (room) => {
  test('a stored flight is flown again in a real sounding; the shift is said in words', async () => {
    const { address } = room.server
    const flight = await post<{ flight: Flight }>(address, '/v1/flights', {
      ...flightRequest({ title: 'Shifted (invented)' }),
    })
    const { page, foreign, complaints } = await room.open('#/book')
    await page.getByRole('link', { name: 'Soundings' }).click()
    await page.getByLabel('Choose a file, or drop it here').setInputFiles({
      name: 'norman.csv',
      mimeType: 'text/csv',
      buffer: fixture('sounding-norman-2023-05-22.csv'),
    })
    await page.getByText('one sounding read').waitFor()
    await page.getByRole('link', { name: 'Book' }).click()
    await page.getByRole('checkbox', { name: 'Choose Shifted (invented)' }).check()
    await page.getByRole('button', { name: 'Fly 1 flight again' }).click()

    // The standard atmosphere has no wind, so the shift is the way from the site to the new landing.
    const shift = page.getByRole('status').getByRole('listitem')
    await shift.waitFor()
    const { latestRun } = await get<Flight>(address, `/v1/flights/${flight.flight.id}`)
    const { distanceM, bearingDeg } = latestRun.landing
    expect(distanceM).toBeGreaterThan(20_000)
    const east = bearingDeg > 56 && bearingDeg < 124 ? /east/ : /./
    expect(await shift.textContent()).toMatch(east)
    expect(await shift.textContent()).toContain(
      `Shifted (invented) lands ${Math.round(distanceM / 1000)} km further `,
    )
    expect(latestRun.air.kind).toBe('profile')
    expect(await page.getByRole('listitem').filter({ hasText: 'Shifted' }).last().textContent())
      // The row of the book says the same.
      .toContain(`2 runs, the newest in ${latestRun.air.name}: lands`)
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test('the farthest moved landing comes first; all are stored or none', async () => {
    const { address } = room.server
    for (const [title, neckLiftG] of [
      ['Order slow (invented)', 2000],
      ['Order fast (invented)', 4000],
    ] as const) {
      await post(address, '/v1/flights', flightRequest({ title, neckLiftG }))
    }
    const gale = await uploaded(address, steadyWind(250, 30))
    const { page } = await room.open('#/book')
    await page.getByLabel('Title contains').fill('order')
    await page.getByText('Choose all 2 shown').click()
    await page.getByLabel('in this air').selectOption(gale)
    await page.getByRole('button', { name: 'Fly 2 flights again' }).click()
    await page.getByText('2 new runs are stored').waitFor()
    const shifts = await page.getByRole('status').getByRole('listitem').allTextContents()
    // The slower ascent drifts longer in the same wind from 250°, towards 70°.
    expect(shifts[0]).toMatch(/^Order slow \(invented\) lands \d+ km further east-northeast/)
    expect(shifts[1]).toMatch(/^Order fast \(invented\) lands \d+ km further east-northeast/)
  })

  test('flights are found by title and by day of release, and the search is kept', async () => {
    const { address } = room.server
    for (const day of ['2027-03-01', '2027-03-02']) {
      const launch = { ...flightRequest().launch, time: `${day}T23:30:00Z` }
      await post(
        address,
        '/v1/flights',
        flightRequest({ title: `Found ${day} (invented)`, launch }),
      )
    }
    const { page } = await room.open('#/book')
    const rows = page.getByRole('list', { name: 'Stored flights' }).getByRole('heading')
    await page.getByLabel('Title contains').fill('FOUND')
    await expect
      .poll(() => rows.allTextContents())
      .toEqual(['Found 2027-03-02 (invented)', 'Found 2027-03-01 (invented)'])
    await page.getByLabel('Released from').fill('2027-03-01')
    await page.getByLabel('to (UTC days)').fill('2027-03-01')
    await expect.poll(() => rows.allTextContents()).toEqual(['Found 2027-03-01 (invented)'])
    await page.reload()
    await expect.poll(() => rows.allTextContents()).toEqual(['Found 2027-03-01 (invented)'])
    await page.getByLabel('Title contains').fill('nowhere to be found')
    await page.getByText('No stored flight matches.').waitFor()
    await page.getByRole('button', { name: 'Show all' }).click()
    await expect.poll(() => rows.count()).toBeGreaterThan(2)
  })

  test('a long book is shown page by page', async () => {
    const { address } = room.server
    for (let number = 0; number < 53; number++) {
      await post(address, '/v1/flights', flightRequest({ title: `Paged ${number} (invented)` }))
    }
    const { page } = await room.open('#/book')
    const rows = page.getByRole('list', { name: 'Stored flights' }).getByRole('heading')
    await page.getByLabel('Title contains').fill('paged')
    await expect.poll(() => rows.first().textContent()).toBe('Paged 52 (invented)')
    expect(await rows.count()).toBe(50)
    await page.getByRole('button', { name: 'Show more' }).click()
    await expect.poll(() => rows.count()).toBe(53)
    expect(await page.getByRole('button', { name: 'Show more' }).count()).toBe(0)
  })

  test('by keyboard alone: a flight is flown again and its runs are laid over each other', async () => {
    const { address } = room.server
    const { flight } = await post<{ flight: Flight }>(
      address,
      '/v1/flights',
      flightRequest({ title: 'By keys (invented)' }),
    )
    await uploaded(address, steadyWind(180, 12))
    const { page } = await room.open(`#/book/${flight.id}`)
    await page.getByRole('heading', { name: 'By keys (invented)' }).waitFor()
    await page.getByLabel('Fly it again in').waitFor()
    await tabTo(page, page.getByRole('button', { name: 'Fly again' }))
    await page.keyboard.press('Enter')
    await page.getByText('The new run lands').waitFor()
    expect(await page.getByText('The new run lands').textContent()).toMatch(
      /km further north(,|\.)/,
    )
    // The new run is read, the one before is drawn beside it: two landings on the map.
    await expect.poll(() => page.locator('.map-mark[data-mark="landing"]').count()).toBe(2)
    const read = page.getByRole('radio', { name: 'Read' })
    expect(await read.first().isChecked()).toBe(true)
    await tabTo(page, read.first())
    await page.keyboard.press('ArrowDown')
    expect(await read.last().isChecked()).toBe(true)
    await page.getByRole('heading', { name: /in US Standard Atmosphere/ }).waitFor()
  })

  test('the shown run is downloaded in each format', async () => {
    const { address } = room.server
    const { items } = await get<{ items: Flight[] }>(address, '/v1/flights?title=Team%20Heron')
    const { page } = await room.open(`#/book/${items[0].id}`)
    const landing = items[0].latestRun.landing
    for (const format of ['GeoJSON', 'KML', 'GPX', 'CSV']) {
      const link = page.getByRole('link', { name: format, exact: true })
      const [download] = await Promise.all([page.waitForEvent('download'), link.click()])
      expect(download.suggestedFilename()).toMatch(new RegExp(`\\.${format.toLowerCase()}$`))
      const text = readFileSync(await download.path(), 'utf8')
      const [latitude, longitude] = lastPlace(format, text)
      expect(Math.abs(latitude - landing.latitudeDeg)).toBeLessThan(1e-5)
      expect(Math.abs(longitude - landing.longitudeDeg)).toBeLessThan(1e-5)
    }
  })

  test('what happened is kept, and each run is compared with it', async () => {
    const { address } = room.server
    const { flight } = await post<{ flight: Flight }>(
      address,
      '/v1/flights',
      flightRequest({ title: 'Observed (invented)' }),
    )
    const { burst } = flight.latestRun
    const { page } = await room.open(`#/book/${flight.id}`)
    await page.getByText('What happened', { exact: true }).click()
    await page.getByLabel('Burst height, m').fill(String(burst.altitudeM + 500))
    // No wind: it was predicted to land at the site, 47.05° north. 0.09° of latitude are 10.0 km there.
    await page.getByLabel('Landing latitude').fill('47.14')
    await page.getByLabel('Landing longitude').fill('8.31')
    await page.getByLabel('Remarks').fill('In a spruce (invented)')
    await page.getByRole('button', { name: 'Keep what happened' }).click()
    await page.getByText('landed 10.0 km north of the prediction, burst 500 m higher').waitFor()
    await page.reload()
    expect(await page.getByLabel('Remarks').inputValue()).toBe('In a spruce (invented)')
    // A place needs both its numbers: said, and nothing is lost.
    await page.getByLabel('Landing latitude').fill('')
    await page.getByRole('button', { name: 'Keep what happened' }).click()
    await page.getByRole('alert').getByText('latitudeDeg').waitFor()
    // Emptied, it is forgotten.
    for (const label of ['Burst height, m', 'Landing longitude', 'Remarks']) {
      await page.getByLabel(label).fill('')
    }
    await page.getByRole('button', { name: 'Keep what happened' }).click()
    await expect
      .poll(async () => (await get<Flight>(address, `/v1/flights/${flight.id}`)).outcome)
      .toBe(null)
  })

  test('a flight is renamed, planned again, and deleted after a second word', async () => {
    const { address } = room.server
    const { flight } = await post<{ flight: Flight }>(
      address,
      '/v1/flights',
      flightRequest({ title: 'Short-lived (invented)', neckLiftG: 2711 }),
    )
    const { page } = await room.open(`#/book/${flight.id}`)
    await page.getByRole('button', { name: 'Rename' }).click()
    await page.getByLabel('Title', { exact: true }).fill('Renamed (invented)')
    await page.getByRole('button', { name: 'Keep', exact: true }).click()
    await page.getByRole('heading', { name: 'Renamed (invented)' }).waitFor()

    await page.getByRole('link', { name: 'Plan again from this' }).click()
    await expect.poll(() => page.getByLabel('Neck lift').inputValue()).toBe('2711')

    await page.goto(`${address}/#/book/${flight.id}`)
    await page.getByRole('button', { name: 'Delete' }).click()
    await page.getByRole('button', { name: 'Keep it' }).click()
    await page.getByRole('button', { name: 'Delete' }).click()
    await page.getByRole('dialog').getByRole('button', { name: 'Delete' }).click()
    await page.getByRole('heading', { name: 'Book of flights' }).waitFor()
    expect((await fetch(`${address}/v1/flights/${flight.id}`)).status).toBe(404)
  })

  test('a watched flight is flown again by itself, and the open page says so', async () => {
    const { address } = room.server
    const launch = { ...flightRequest().launch, time: hoursFromRelease(0) }
    const { flight } = await post<{ flight: Flight }>(
      address,
      '/v1/flights',
      flightRequest({ title: 'Watched (invented)', launch }),
    )
    const { page } = await room.open(`#/book/${flight.id}`)
    await page.getByText('Not watched').waitFor()
    await page.getByLabel('Tell where the landing moves more than, km').fill('20')
    await page.getByRole('button', { name: 'Watch it' }).click()
    await page.getByText('Watched: it is flown again').waitFor()
    const watch = await get<{ tellBeyondM: number }>(address, `/v1/flights/${flight.id}/watch`)
    expect(watch.tellBeyondM).toBe(20_000)

    const runs = page.getByRole('radio', { name: 'Read' })
    const told = page.getByRole('list', { name: /^What happened to the prediction/ })
    // A breeze moves it less than 20 km: flown, not told. A gale is told.
    const validAt = hoursFromRelease(-4)
    await uploaded(address, steadyWind(270, 1, { validAt }))
    await expect.poll(() => runs.count(), { timeout: 15_000 }).toBe(2)
    expect(await told.count()).toBe(0)
    await uploaded(address, steadyWind(270, 20, { validAt: hoursFromRelease(-2) }))
    await expect.poll(() => told.getByRole('listitem').count(), { timeout: 15_000 }).toBe(1)
    // All of the drift since it was last told, which was at the site: as far as it lands from there.
    const { latestRun } = await get<Flight>(address, `/v1/flights/${flight.id}`)
    expect(await told.textContent()).toContain(
      `more than 20.0 km since it was last told: lands ${Math.round(latestRun.landing.distanceM / 1000)} km further east`,
    )
    expect(await runs.count()).toBe(3)
    await page.getByRole('button', { name: 'Watch it no longer' }).click()
    await page.getByText('Not watched').waitFor()
    expect((await fetch(`${address}/v1/flights/${flight.id}/watch`)).status).toBe(404)
  })

  test('a book opened while the service is away fills in once it is back', async () => {
    const { page } = await room.open('#/soundings')
    await page.getByRole('heading', { name: 'Soundings' }).first().waitFor()
    await page.getByRole('link', { name: 'Book' }).click()
    const rows = page.getByRole('list', { name: 'Stored flights' })
    await rows.waitFor()
    await room.stop()
    await page.getByLabel('Title contains').fill('team heron')
    await page.getByRole('alert').getByText('does not answer').waitFor()
    await room.startAgain()
    await expect.poll(() => rows.getByRole('listitem').count(), { timeout: 15_000 }).toBe(1)
    expect(await page.getByRole('alert').getByText('does not answer').count()).toBe(0)
  })

  test.each([
    ['light', 1280],
    ['dark', 1280],
    ['light', 360],
    ['dark', 360],
  ] as const)('nothing for axe to find: %s, %d px', async (colorScheme, width) => {
    const { address } = room.server
    const { items } = await get<{ items: Flight[] }>(address, '/v1/flights?title=Team%20Heron')
    const { page } = await room.open('#/book', { colorScheme, viewport: { width, height: 800 } })
    await page.getByRole('list', { name: 'Stored flights' }).waitFor()
    await page.getByLabel('in this air').waitFor()
    await expectAccessible(page)
    await expectNoSidewaysScrolling(page)
    await page.goto(`${address}/#/book/${items[0].id}`)
    await page.getByLabel('Fly it again in').waitFor()
    await page.locator('.flight-map .chart[data-coasts="drawn"]').waitFor({ timeout: 30_000 })
    await page.getByText('What happened', { exact: true }).click()
    await expectAccessible(page)
    await expectNoSidewaysScrolling(page)
  })
})

async function get<Answer>(address: string, path: string): Promise<Answer> {
  return (await (await fetch(address + path)).json()) as Answer
}

async function post<Answer>(address: string, path: string, body: object): Promise<Answer> {
  const headers = { 'content-type': 'application/json' }
  const answer = await fetch(address + path, {
    method: 'POST',
    headers,
    body: JSON.stringify(body),
  })
  if (answer.status !== 201) throw new Error(await answer.text())
  return (await answer.json()) as Answer
}

async function uploaded(address: string, sounding: object): Promise<string> {
  const { profiles } = await post<{ profiles: { id: string }[] }>(address, '/v1/profiles', sounding)
  return profiles[0].id
}

/** Latitude and longitude of the last point of a track file, degrees. */
function lastPlace(format: string, text: string): [number, number] {
  if (format === 'GeoJSON') {
    const { features } = JSON.parse(text) as {
      features: { geometry: { type: string; coordinates: number[][] } }[]
    }
    const line = features.findLast(({ geometry }) => geometry.type === 'LineString')
    const [longitude, latitude] = line?.geometry.coordinates.at(-1) ?? []
    return [latitude, longitude]
  }
  if (format === 'CSV') {
    const rows = text.trim().split('\r\n')
    const heading = rows[0].split(',')
    const cells = (rows.at(-1) ?? '').split(',')
    const cell = (name: string) => Number(cells[heading.indexOf(name)])
    return [cell('latitudeDeg'), cell('longitudeDeg')]
  }
  const parser = new XMLParser({ ignoreAttributes: false, attributeNamePrefix: '' })
  parser.parse(text) // well formed
  if (format === 'GPX') {
    const [, latitude, longitude] =
      [...text.matchAll(/<trkpt lat="([-\d.]+)" lon="([-\d.]+)"/g)].at(-1) ?? []
    return [Number(latitude), Number(longitude)]
  }
  const [, coordinates] = [...text.matchAll(/<coordinates>([^<]+)</g)].at(-1) ?? []
  const [longitude, latitude] = (coordinates.trim().split(/\s+/).at(-1) ?? '').split(',')
  return [Number(latitude), Number(longitude)]
}
