import { inflateSync } from 'node:zlib'
import { type Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { type Flight } from '../../src/service/schemas/flight.ts'
import { type Run } from '../../src/service/schemas/run.ts'
import { fixture, flightRequest } from '../service/harness.ts'
import { expectAccessible, expectNoSidewaysScrolling, inChromium } from './chromium.ts'

/** A flight train that somebody described in full. */
const TRAIN = {
  massG: 4300,
  packages: [
    { name: 'Ozone sonde', massG: 2400, smallestFaceCm2: 190 },
    { name: 'Camera', massG: 900, smallestFaceCm2: 120 },
    { name: 'Tracker and beacon', massG: 400, smallestFaceCm2: 60 },
    { name: 'Parachute and line', massG: 600 },
  ],
  lineStrengthN: 200,
}

/** Millimetres to the points that PDF counts in: ISO 32000-1, 8.3.2.3. */
const POINT_MM = 25.4 / 72

inChromium('notice sheet', (room) => {
  test('prints on one page of A4 and of Letter, without the frame', async () => {
    const { run } = await storedFlight(room.server.address, { payload: TRAIN, neckLiftG: 6200 })
    for (const units of ['metric', 'aviation']) {
      const { page } = await room.open(`#/notice/${run.id}`)
      await page.getByRole('table').waitFor()
      if (units === 'aviation') await page.getByRole('switch').click()
      // ISO 216: 210 mm by 297 mm. ANSI/ASME Y14.1, size A: 8.5 in by 11 in.
      for (const [format, width, height] of [
        ['A4', 210, 297],
        ['Letter', 215.9, 279.4],
      ] as const) {
        const pages = pagesOf(await page.pdf({ format }))
        expect(pages).toHaveLength(1)
        // The browser's A4 is rounded to hundredths of an inch.
        expect(Math.abs(pages[0].widthMm - width)).toBeLessThan(0.5)
        expect(Math.abs(pages[0].heightMm - height)).toBeLessThan(0.5)
      }
      await page.emulateMedia({ media: 'print' })
      for (const furniture of ['navigation', 'banner', 'contentinfo', 'textbox', 'button']) {
        expect(await page.getByRole(furniture as 'button').count()).toBe(0)
      }
      expect(await page.getByRole('article').isVisible()).toBe(true)
    }
  })

  test('many levels run on to a second page: the count of pages can tell', async () => {
    const { run } = await storedFlight(room.server.address)
    const { page } = await room.open(`#/notice/${run.id}`)
    const levels = Array.from({ length: 59 }, (_, index) => 10 * (index + 3)).join(' ')
    await page.getByLabel('Flight levels to list').fill(levels)
    await expect.poll(() => page.getByRole('row').count()).toBe(1 + 2 * 59)
    expect(pagesOf(await page.pdf({ format: 'A4' })).length).toBeGreaterThan(1)
  })

  test('tells the flight in a real sounding: passages up and down, extent, class, law', async () => {
    const { run, flight } = await storedFlight(room.server.address, {
      payload: TRAIN,
      neckLiftG: 6200,
    })
    const { page, foreign, complaints } = await room.open(`#/notice/${run.id}`)
    const sheet = page.getByRole('article')
    await sheet.getByRole('table').waitFor()
    const text = (await sheet.textContent())?.replaceAll(/\s+/g, ' ') ?? ''
    expect(text).toContain(flight.title)
    // 35.18° are 35° 10.8′, 97.44° are 97° 26.4′.
    expect(text).toContain('35.18000° N, 97.44000° W; 35° 10.800′ N, 97° 26.400′ W; 345 m')
    expect(text).toContain('22 May 2023, 12:00 UTC')
    expect(text).toContain(
      'medium by ICAO Annex 2, as the payload of 4.3 kg is 4 kg or more and under 6 kg',
    )
    expect(text).not.toContain('Not known')
    expect(text).toContain('the competent authority decides')
    expect(text).toContain('a pressure of the standard atmosphere')

    // The sounding reports 500 hPa; FL 183 is 18 289 ft, 500 hPa (US Standard Atmosphere 1976, table I:
    // 500 hPa lies at 5574 m).
    await page.getByLabel('Flight levels to list').fill('182.89, 990')
    await page.getByLabel('Heights to list').fill('200')
    await expect.poll(() => sheet.getByRole('row').count()).toBe(3)
    const cells = async (row: number) =>
      sheet.getByRole('row').nth(row).locator('th, td').allTextContents()
    const [up, down] = [await cells(1), await cells(2)]
    expect([up[1], down[1]]).toEqual(['up', 'down'])
    const reported = heightAt500hPa()
    expect(Math.abs(metres(up[5]) - reported)).toBeLessThan(10)
    expect(Math.abs(metres(down[5]) - reported)).toBeLessThan(10)
    expect(up[2] < down[2]).toBe(true)
    expect(await sheet.textContent()).toMatch(/Never passed: FL 990, 200 m\./)
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test('asks for what the class hangs on, and keeps it with the flight', async () => {
    const { address } = room.server
    const { run, flight } = await storedFlight(address, { payload: { massG: 2400 } })
    const { page } = await room.open(`#/notice/${run.id}`)
    const sheet = page.getByRole('article')
    await sheet
      .getByText('could make it heavier: the masses of the single packages, the force at which')
      .waitFor()
    await page.getByRole('button', { name: 'Add a package' }).click()
    await page.getByLabel('Package', { exact: true }).fill('Dense sampler')
    await page.getByLabel('Mass', { exact: true }).fill('2100')
    await page.getByLabel('Smallest face').fill('100')
    await page.getByLabel('The line parts at').fill('180')
    await page.getByRole('button', { name: 'Keep the packages with the flight' }).click()
    // 2.1 kg over 100 cm² are 21 g/cm², over the 13 of ICAO Annex 2, appendix on unmanned free balloons.
    await sheet.getByText('heavy', { exact: true }).waitFor()
    expect(await sheet.textContent()).toContain('21.0 g/cm² over its smallest face, over 13 g/cm²')
    expect(await sheet.textContent()).toContain(
      'Dense sampler: 2\u202f100 g, smallest face 100 cm²',
    )
    const kept = (await (await fetch(`${address}/v1/flights/${flight.id}`)).json()) as Flight
    expect(kept.plan.payload).toEqual({
      massG: 2400,
      packages: [{ name: 'Dense sampler', massG: 2100, smallestFaceCm2: 100 }],
      lineStrengthN: 180,
    })
    // The plan was not changed in what flies: the sheet does not ask to fly again.
    expect(await sheet.getByText('fly it again before').count()).toBe(0)
  })

  test('levels are kept; levels that are none are refused, and the old sheet is not printed', async () => {
    const { run } = await storedFlight(room.server.address)
    const { page } = await room.open(`#/notice/${run.id}`)
    const print = page.getByRole('button', { name: 'Print the sheet' })
    await page.getByLabel('Flight levels to list').fill('60 120')
    await expect.poll(() => rowNames(page)).toEqual(['FL 60', 'FL 120', 'FL 120', 'FL 60'])
    await page.reload()
    await expect.poll(() => rowNames(page)).toEqual(['FL 60', 'FL 120', 'FL 120', 'FL 60'])
    expect(await print.isEnabled()).toBe(true)
    await page.getByLabel('Flight levels to list').fill('high')
    await page.getByRole('alert').getByText('flightLevels').waitFor()
    expect(await print.isEnabled()).toBe(false)
    await page.getByRole('button', { name: 'Usual levels' }).click()
    await expect.poll(async () => (await rowNames(page)).length).toBe(14)
    expect(await print.isEnabled()).toBe(true)
  })

  test.each([
    ['light', 1280],
    ['dark', 1280],
    ['light', 360],
    ['dark', 360],
  ] as const)('nothing for axe to find: %s, %d px', async (colorScheme, width) => {
    const { run } = await storedFlight(room.server.address, { payload: TRAIN, neckLiftG: 6200 })
    const { page } = await room.open(`#/notice/${run.id}`, {
      colorScheme,
      viewport: { width, height: 800 },
    })
    await page.getByRole('table').waitFor()
    await page.getByText('Packages on the line').click()
    await expectAccessible(page)
    await expectNoSidewaysScrolling(page)
  })
})

/** A flight in the real sounding of the fixtures, over its station. */
async function storedFlight(
  address: string,
  changes: object = {},
): Promise<{ flight: Flight; run: Run }> {
  const uploaded = await fetch(`${address}/v1/profiles`, {
    method: 'POST',
    headers: { 'content-type': 'text/csv' },
    body: new Uint8Array(fixture('sounding-norman-2023-05-22.csv')),
  })
  const { profiles } = (await uploaded.json()) as { profiles: { id: string }[] }
  const request = flightRequest({
    title: 'Noticed (invented)',
    launch: {
      latitudeDeg: 35.18,
      longitudeDeg: -97.44,
      altitudeM: 345,
      time: '2023-05-22T12:00:00Z',
    },
    air: { kind: 'profile', id: profiles[0].id },
    ...changes,
  })
  const answer = await fetch(`${address}/v1/flights`, {
    method: 'POST',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify(request),
  })
  if (answer.status !== 201) throw new Error(await answer.text())
  return (await answer.json()) as { flight: Flight; run: Run }
}

/** Geometric height in m that the fixture reports, interpolated in ln p, at 500 hPa. */
function heightAt500hPa(): number {
  const [heading, ...lines] = fixture('sounding-norman-2023-05-22.csv')
    .toString()
    .trim()
    .split(/\r?\n/)
  const names = heading.split(',').map((name) => name.trim())
  const [p, z] = ['pressure_hPa', 'geopotential height_m'].map((name) => names.indexOf(name))
  const rows = lines.map((line) => line.split(',').map(Number))
  const above = rows.findIndex((row) => row[p] <= 500)
  const [low, high] = [rows[above - 1], rows[above]]
  const share = Math.log(low[p] / 500) / Math.log(low[p] / high[p])
  // Geopotential to geometric at 5.8 km: 5 m more (US Standard Atmosphere 1976, eq. 19).
  return low[z] + (high[z] - low[z]) * share + 5
}

async function rowNames(page: Page): Promise<string[]> {
  return page.getByRole('rowheader').allTextContents()
}

/** A reading such as "5 790 m". */
function metres(text: string): number {
  return Number(text.replace(/[^\d.]/g, ''))
}

/** The pages of a PDF with their sizes: its page objects, also those in compressed streams. */
function pagesOf(pdf: Buffer): { widthMm: number; heightMm: number }[] {
  const text = pdf.toString('latin1')
  const streams = [...text.matchAll(/stream\r?\n/g)].map(({ index, 0: start }) => {
    const from = index + start.length
    try {
      return inflateSync(pdf.subarray(from, text.indexOf('endstream', from))).toString('latin1')
    } catch {
      return '' // a picture or a font
    }
  })
  const objects = [text, ...streams].join('\n')
  const pages = [...objects.matchAll(/\/Type \/Page\b[^]*?\/MediaBox \[0 0 ([\d.]+) ([\d.]+)\]/g)]
  return pages.map(([, width, height]) => ({
    widthMm: Number(width) * POINT_MM,
    heightMm: Number(height) * POINT_MM,
  }))
}
