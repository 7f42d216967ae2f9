import { readFileSync } from 'node:fs'
import { type Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { expectAccessible, expectNoSidewaysScrolling, inChromium } from './chromium.ts'

const FIXTURES = new URL('../fixtures/', import.meta.url).pathname
const NORMAN = `${FIXTURES}sounding-norman-2023-05-22.csv`
const BARROW = `${FIXTURES}igra2-point-barrow-2010-06-01.txt`

/** The real ascent of an IGRA file under as many hours as wanted: a file of many soundings. */
function manyOfBarrow(count: number): string {
  const text = readFileSync(BARROW, 'latin1')
  return Array.from({ length: count }, (_, day) =>
    text.replace(/^(#\w{11} \d{4} \d{2}) \d{2}/, (_whole, start: string) =>
      [start, String(day + 1).padStart(2, '0')].join(' '),
    ),
  ).join('')
}

/** Drops a file on the part of the page that takes them, as a hand does. */
async function drop(page: Page, name: string, content: string): Promise<void> {
  const files = await page.evaluateHandle(`
    const transfer = new DataTransfer()
    transfer.items.add(new File([${JSON.stringify(content)}], ${JSON.stringify(name)}))
    transfer`)
  const target = page.getByRole('region', { name: 'Add soundings' })
  await target.dispatchEvent('dragover', { dataTransfer: files })
  await target.dispatchEvent('drop', { dataTransfer: files })
}

inChromium('soundings', (room) => {
  test('a chosen file is read, told about and drawn', async () => {
    const { page, foreign, complaints } = await room.open('#/soundings')
    await page.getByLabel('Choose a file, or drop it here').setInputFiles(NORMAN)
    await page.getByText('one sounding read').waitFor()
    const sheet = page.getByRole('article')
    await sheet.getByRole('heading', { level: 2 }).waitFor()
    // The file's own release time, and what the reader says of its columns.
    expect(await sheet.textContent()).toContain('2023-05-22 11:04 UTC')
    expect(await sheet.textContent()).toContain('headings not used')
    const temperature = sheet.getByRole('img', { name: /^Temperature against height, coldest/ })
    expect(await temperature.getAttribute('aria-label')).toMatch(/coldest −\d\d\.\d °C at/)
    await sheet.getByRole('img', { name: /^Wind against height, strongest/ }).waitFor()

    await page.getByText('Levels as a table').click()
    const rows = page.getByRole('region', { name: 'Levels of the sounding' }).getByRole('row')
    await expect.poll(() => rows.count()).toBe(201)
    await page.getByRole('button', { name: /^Show all \d+ levels/ }).click()
    await expect.poll(() => rows.count()).toBeGreaterThan(250)
    // The lowest level of the file: 345 m, 977 hPa, 12.8 °C.
    expect(await rows.nth(1).textContent()).toMatch(/^345977\.012\.8/)
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test('a dropped file of many soundings gives many; the list is paged', async () => {
    const { page } = await room.open('#/soundings')
    await drop(page, 'barrow.txt', manyOfBarrow(24))
    await page.getByText('24 soundings read').waitFor()
    const items = page.getByRole('listitem').filter({ hasText: 'USM00070026' })
    await expect.poll(() => items.count()).toBe(20)
    await page.getByRole('button', { name: 'Show older ones' }).click()
    await expect.poll(() => items.count()).toBe(24)
    expect(
      await page.getByRole('article').getByRole('heading', { level: 2 }).textContent(),
    ).toMatch(/^USM00070026 2010-05-/)
  })

  test('a name and a time may be given in place of the file’s', async () => {
    const { page } = await room.open('#/soundings')
    await page.getByLabel('Name, if not the file’s own').fill('Morning balloon (invented)')
    await page.getByLabel('Valid at (UTC), if not as the file says').fill('2026-12-04T05:30')
    await page.getByLabel('Choose a file, or drop it here').setInputFiles(NORMAN)
    const heading = page.getByRole('heading', { name: 'Morning balloon (invented)' })
    await heading.waitFor()
    expect(await page.getByRole('article').textContent()).toContain('2026-12-04 05:30 UTC')
  })

  test('a file that is no sounding is refused in words, and nothing is stored', async () => {
    const { page } = await room.open('#/soundings')
    const stored = await countStored(room.server.address)
    await page.getByLabel('Choose a file, or drop it here').setInputFiles({
      name: 'picture.png',
      mimeType: 'image/png',
      buffer: Buffer.from('89504e470d0a1a0a0000000d49484452', 'hex'),
    })
    await page.getByText('picture.png was not taken.').waitFor()
    const faults = page.getByRole('region', { name: 'Add soundings' }).getByRole('listitem')
    expect(await faults.count()).toBeGreaterThan(0)
    await drop(page, 'one-level.csv', 'altitude_m,temperature_C\n100,10\n')
    await page.getByText('one-level.csv was not taken.').waitFor()
    expect(await countStored(room.server.address)).toBe(stored)
  })

  test('a sounding is deleted after a second word; one that was flown in stays', async () => {
    const { page } = await room.open('#/soundings')
    await drop(page, 'short-lived.csv', readFileSync(NORMAN, 'utf8'))
    await page.getByText('short-lived.csv: one sounding read').waitFor()
    await page.getByRole('button', { name: 'Delete this sounding' }).click()
    await page.getByRole('button', { name: 'Keep it' }).click()
    const before = await countStored(room.server.address)
    await page.getByRole('button', { name: 'Delete this sounding' }).click()
    await page.getByRole('button', { name: 'Delete it' }).click()
    await page.getByText('Choose a sounding to see').waitFor()
    expect(await countStored(room.server.address)).toBe(before - 1)

    const { id } = await demoSounding(room.server.address)
    await page.goto(`${room.server.address}/#/soundings/${id}`)
    await page.getByRole('button', { name: 'Delete this sounding' }).click()
    await page.getByRole('button', { name: 'Delete it' }).click()
    await page.getByText(/Not deleted\. 1 runs were flown in this sounding/).waitFor()
  })

  test.each([
    ['light', 1280],
    ['dark', 1280],
    ['light', 360],
    ['dark', 360],
  ] as const)('nothing for axe to find: %s, %d px', async (colorScheme, width) => {
    const { id } = await demoSounding(room.server.address)
    const { page } = await room.open(`#/soundings/${id}`, {
      colorScheme,
      viewport: { width, height: 800 },
    })
    await page.getByRole('img', { name: /^Wind against height/ }).waitFor()
    await page.getByText('Levels as a table').click()
    await expectAccessible(page)
    await expectNoSidewaysScrolling(page)
  })
})

async function countStored(address: string): Promise<number> {
  const answer = await fetch(`${address}/v1/profiles?limit=200`)
  return ((await answer.json()) as { items: unknown[] }).items.length
}

async function demoSounding(address: string): Promise<{ id: string }> {
  const answer = await fetch(`${address}/v1/profiles?limit=200`)
  const { items } = (await answer.json()) as { items: { id: string; name: string }[] }
  const demo = items.find(({ name }) => name.startsWith('Invented demo'))
  if (!demo) throw new Error('no demo sounding')
  return demo
}
