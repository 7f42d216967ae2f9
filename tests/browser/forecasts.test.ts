import { expect, test } from 'vitest'
import { expectAccessible, expectNoSidewaysScrolling, inChromium } from './chromium.ts'

const FIELDS = new URL('../fixtures/fields/', import.meta.url).pathname

inChromium('forecasts', (room) => {
  test('a file is sent, told about and drawn over a flight’s site; then deleted', async () => {
    const { page, foreign, complaints } = await room.open('#/forecasts')
    await page.getByText('No forecast is stored yet.').waitFor()
    await page.getByLabel('Choose a GRIB file').setInputFiles(`${FIELDS}gfs-500-250hPa.grib2`)
    const sheet = page.getByRole('article')
    await sheet.getByRole('img', { name: /all round the earth/ }).waitFor({ timeout: 30_000 })
    expect(await sheet.textContent()).toContain('Run of')
    await page.getByText('lies outside this forecast’s times').waitFor()
    await sheet.getByRole('img', { name: /^Wind against height, strongest/ }).waitFor()
    await expectAccessible(page)
    await page.setViewportSize({ width: 360, height: 900 })
    await expectNoSidewaysScrolling(page)
    await page.getByRole('button', { name: 'Delete this forecast' }).click()
    await page.getByRole('button', { name: 'Delete it' }).click()
    await page.getByText('No forecast is stored yet.').waitFor()
    expect({ foreign, complaints }).toEqual({ foreign: [], complaints: [] })
  })

  test('a file that is no forecast is refused in words', async () => {
    const { page } = await room.open('#/forecasts')
    await page
      .getByLabel('Choose a GRIB file')
      .setInputFiles({ name: 'notes.txt', mimeType: 'text/plain', buffer: Buffer.from('no grib') })
    await page.getByText(/^notes\.txt was not taken: /).waitFor()
  })
})
