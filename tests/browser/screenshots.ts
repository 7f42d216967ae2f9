import { existsSync, mkdirSync, mkdtempSync, rmSync, statSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { chromium, type Browser, type Page } from 'playwright-core'
import { end, startServer } from '../service/startedServer.ts'

/**
 * Makes the README's pictures anew from the built program and its invented demo data: one of each view,
 * as WebP by the browser itself.
 */
const FOLDER = new URL('../../.readme/', import.meta.url).pathname
const CHROMIUM = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium'

/** The evening before the invented flight: the plan sheet offers the next morning. */
const EVENING = '2026-12-04T18:00:00Z'
const WINDOW = { width: 1200, height: 900 }

/** Most bytes of a picture. */
const MOST = 80_000

interface Level {
  windFromDeg: number
  windSpeedMs: number
}

interface DemoFlight {
  id: string
  plan: object
  latestRun: { id: string }
}

async function main(): Promise<void> {
  const folder = mkdtempSync(join(tmpdir(), 'driftbook-pictures-'))
  const server = await startServer({ DATABASE_FILE: join(folder, 'a.sqlite') })
  const browser = await chromium.launch({
    executablePath: CHROMIUM,
    args: ['--no-sandbox', '--use-angle=swiftshader', '--enable-unsafe-swiftshader'],
  })
  try {
    if (!existsSync(FOLDER)) mkdirSync(FOLDER)
    await takePictures(browser, server.address)
  } finally {
    await browser.close()
    await end(server, 'SIGTERM')
    rmSync(folder, { recursive: true })
  }
}

async function takePictures(browser: Browser, address: string): Promise<void> {
  const { flight, noon } = await addMoreInvented(address)
  const open = async (view: string) => {
    const context = await browser.newContext({ viewport: WINDOW, reducedMotion: 'reduce' })
    const page = await context.newPage()
    await page.clock.setFixedTime(EVENING)
    await page.goto(`${address}/#${view}`)
    return page
  }
  const mapDrawn = (page: Page) =>
    page.locator('.flight-map .chart[data-coasts="drawn"]').waitFor({ timeout: 60_000 })

  const plan = await open(`/plan/${flight.id}`)
  await mapDrawn(plan)
  await keep(plan, 'plan')

  const book = await open('/book')
  await book.getByLabel(/^Choose all/).check()
  await book.getByRole('button', { name: /^Fly \d flights again/ }).click()
  await book.getByText('new runs are stored').waitFor()
  await keep(book, 'book')

  const one = await open(`/book/${flight.id}`)
  await one.getByRole('checkbox', { name: 'Draw' }).last().check()
  await mapDrawn(one)
  await keep(one, 'flight')

  const soundings = await open(`/soundings/${noon}`)
  await soundings.getByRole('img', { name: /^Wind against height/ }).waitFor()
  await keep(soundings, 'soundings')

  const notice = await open(`/notice/${flight.latestRun.id}`)
  await notice.getByRole('table').waitFor()
  await keep(notice, 'notice', 'article')
}

/** A later sounding, turned and faster, and two more flights: all invented. */
async function addMoreInvented(address: string) {
  const call = async <Answer>(path: string, body?: object): Promise<Answer> => {
    const headers = { 'content-type': 'application/json' }
    const sent = body ? { method: 'POST', headers, body: JSON.stringify(body) } : {}
    const answer = await fetch(address + path, sent)
    if (!answer.ok) throw new Error(await answer.text())
    return (await answer.json()) as Answer
  }
  const [flight] = (await call<{ items: DemoFlight[] }>('/v1/flights')).items
  const [dawn] = (await call<{ items: { id: string }[] }>('/v1/profiles')).items
  await call('/v1/flights', {
    ...flight.plan,
    title: 'Invented demo: Larkfell camera flight, Team Heron',
    neckLiftG: 3300,
    payload: {
      massG: 2200,
      packages: [
        { name: 'Camera', massG: 1300, smallestFaceCm2: 210 },
        { name: 'Tracker', massG: 300, smallestFaceCm2: 60 },
      ],
      lineStrengthN: 180,
    },
  })
  const { levels } = await call<{ levels: Level[] }>(`/v1/profiles/${dawn.id}/levels`)
  const later = await call<{ profiles: { id: string }[] }>('/v1/profiles', {
    name: 'Invented noon sounding, Larkfell plateau',
    validAt: '2026-12-05T08:30:00Z',
    latitudeDeg: 47.31,
    longitudeDeg: 9.12,
    levels: levels.map((level) => ({
      ...level,
      windFromDeg: (level.windFromDeg + 11) % 360,
      windSpeedMs: 1.12 * level.windSpeedMs,
    })),
  })
  return { flight, noon: later.profiles[0].id }
}

/** Writes what the window, or a part of the page, shows. */
async function keep(page: Page, name: string, part?: string): Promise<void> {
  await page.mouse.move(0, 0)
  const shot = await (part ? page.locator(part) : page).screenshot({ animations: 'disabled' })
  const bytes = await webp(page, shot)
  const file = join(FOLDER, `${name}.webp`)
  writeFileSync(file, bytes)
  const { size } = statSync(file)
  if (size > MOST) throw new Error(`${name}.webp has ${size} bytes, more than ${MOST}`)
  console.log(`${name}.webp  ${size} bytes`)
  await page.context().close()
}

/** A PNG as WebP, encoded by a blank page of the browser. */
async function webp(page: Page, png: Buffer): Promise<Buffer> {
  const blank = await page.context().newPage()
  const encoded = await blank.evaluate<string>(`(async () => {
    const bytes = Uint8Array.from(atob('${png.toString('base64')}'), (c) => c.charCodeAt(0))
    const image = await createImageBitmap(new Blob([bytes], { type: 'image/png' }))
    const canvas = new OffscreenCanvas(image.width, image.height)
    canvas.getContext('2d').drawImage(image, 0, 0)
    const blob = await canvas.convertToBlob({ type: 'image/webp', quality: 0.7 })
    const encoded = new Uint8Array(await blob.arrayBuffer())
    return btoa(Array.from(encoded, (byte) => String.fromCharCode(byte)).join(''))
  })()`)
  return Buffer.from(encoded, 'base64')
}

await main()
