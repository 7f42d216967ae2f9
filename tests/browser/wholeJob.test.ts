import { readFileSync } from 'node:fs'
import { type Locator, type Page } from 'playwright-core'
import { expect, test } from 'vitest'
import { inChromium } from './chromium.ts'
import { tabTo, typeInto } from './keyboard.ts'

const NORMAN = new URL('../fixtures/sounding-norman-2023-05-22.csv', import.meta.url).pathname

/** How somebody works the page. */
interface Hand {
  press: (target: Locator) => Promise<void>
  type: (field: Locator, text: string) => Promise<void>
}

const HANDS: Record<string, (page: Page) => Hand> = {
  mouse: () => ({
    press: (target) => target.click(),
    type: (field, text) => field.fill(text),
  }),
  keyboard: (page) => ({
    press: async (target) => {
      await target.waitFor()
      await tabTo(page, target)
      await page.keyboard.press('Enter')
    },
    type: (field, text) => typeInto(page, field, text),
  }),
}

inChromium('the whole job', (room) => {
  test.each(Object.keys(HANDS))('from plan to download by %s alone', async (by) => {
    const { page, foreign, complaints } = await room.open('#/')
    const hand = HANDS[by](page)
    const title = `Whole job by ${by} (invented)`

    // Plan, trial, store
    await page.getByRole('heading', { name: 'Prediction' }).waitFor()
    await hand.type(page.getByLabel('Neck lift'), '2900')
    await hand.type(page.getByLabel('Title in the book'), title)
    await hand.press(page.getByRole('button', { name: 'Store this flight' }))
    await page.getByText('Stored.').waitFor()

    // A real sounding
    await hand.press(page.getByRole('link', { name: 'Soundings' }))
    const file = page.getByLabel('Choose a file, or drop it here')
    const [chooser] = await Promise.all([page.waitForEvent('filechooser'), hand.press(file)])
    await chooser.setFiles(NORMAN)
    await page.getByText('one sounding read').waitFor()

    // Flown again in it, the newest that is stored; the shift in words
    await hand.press(page.getByRole('link', { name: 'Book', exact: true }))
    await hand.press(page.getByRole('link', { name: title }))
    await page.getByRole('heading', { name: title }).waitFor()
    await hand.press(page.getByRole('button', { name: 'Fly again' }))
    await page.getByText(/The new run lands \d+ km further/).waitFor()

    // The sheet for the authority
    await hand.press(page.getByRole('link', { name: 'Notice sheet' }))
    await page
      .getByRole('heading', { name: new RegExp(`free balloon: ${title.slice(0, 9)}`) })
      .waitFor()
    // FL 50 to 600 by default: seven levels up and down, under a heading.
    expect(await page.getByRole('row').count()).toBe(15)

    // The track as a file
    await hand.press(page.getByRole('link', { name: 'Back to the flight' }))
    const csv = page.getByRole('link', { name: 'CSV' })
    const [download] = await Promise.all([page.waitForEvent('download'), hand.press(csv)])
    expect(readFileSync(await download.path(), 'utf8')).toMatch(/^elapsedS,time,latitudeDeg/)
    expect({ foreign, complaints: complaints.filter((one) => !one.includes('404')) }).toEqual({
      foreign: [],
      complaints: [], // a flight that is not watched has no watch: the browser writes that 404 down
    })
  })
})
