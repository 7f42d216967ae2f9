import { existsSync, mkdtempSync, readFileSync, rmSync } from 'node:fs'
import { createRequire } from 'node:module'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { type Browser, type BrowserContextOptions, chromium, type Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, onTestFinished } from 'vitest'
import { end, startServer, type StartedServer } from '../service/startedServer.ts'

/** The browser: the one that is named, or Debian's. */
const CHROMIUM = process.env.CHROMIUM_PATH ?? '/usr/bin/chromium'

const AXE = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8')

/** The page in a browser, on a server of its own. */
export interface Opened {
  page: Page
  /** Addresses elsewhere that the page asked for; none was answered */
  foreign: string[]
  /** Errors that the page wrote or threw */
  complaints: string[]
}

export interface BrowserRoom {
  server: StartedServer
  /** Opens a view, `#/soundings` for one, in a fresh context */
  open: (view: string, options?: BrowserContextOptions) => Promise<Opened>
  /** Stops the server, as a failing laptop would */
  stop: () => Promise<void>
  /** Starts it again on the same address and database */
  startAgain: () => Promise<void>
}

/** Tests in a real browser on the built program; skipped where there is no browser, but for CI. */
export function inChromium(
  name: string,
  tests: (room: BrowserRoom) => void,
  environment: Record<string, string> = {},
  /** Origins beside the service's own that the page may ask */
  known: readonly string[] = [],
): void {
  const runs = existsSync(CHROMIUM) || process.env.CI === 'true'
  const title = runs ? name : `${name} (no browser at ${CHROMIUM}: set CHROMIUM_PATH)`
  describe.skipIf(!runs)(title, { timeout: 60_000 }, () => {
    const folder = mkdtempSync(join(tmpdir(), 'driftbook-browser-'))
    let browser: Browser
    const settings = { DATABASE_FILE: join(folder, 'a.sqlite'), ...environment }
    const room = { open, stop, startAgain } as BrowserRoom

    beforeAll(async () => {
      room.server = await startServer(settings)
      browser = await chromium.launch({
        executablePath: CHROMIUM,
        // WebGL without a graphics card.
        args: ['--no-sandbox', '--use-angle=swiftshader', '--enable-unsafe-swiftshader'],
      })
    })
    afterAll(async () => {
      await browser.close()
      await end(room.server, 'SIGTERM')
      rmSync(folder, { recursive: true })
    })

    async function stop(): Promise<void> {
      await end(room.server, 'SIGTERM')
    }
    async function startAgain(): Promise<void> {
      const { port } = new URL(room.server.address)
      room.server = await startServer({ ...settings, PORT: port })
    }

    async function open(view: string, options: BrowserContextOptions = {}): Promise<Opened> {
      const context = await browser.newContext({
        viewport: { width: 1280, height: 1100 },
        reducedMotion: 'reduce',
        ...options,
      })
      // A map left open goes on drawing, without a graphics card at the cost of all other tests.
      onTestFinished(() => context.close())
      const [foreign, complaints]: [string[], string[]] = [[], []]
      const { address } = room.server
      await context.route(
        (url) => url.origin !== address && !known.includes(url.origin),
        (route) => {
          foreign.push(route.request().url())
          return route.abort()
        },
      )
      const page = await context.newPage()
      page.on('pageerror', (error) => complaints.push(error.message))
      page.on('console', (message) => {
        if (message.type() === 'error') complaints.push(message.text())
      })
      await page.goto(`${address}/${view}`)
      return { page, foreign, complaints }
    }

    tests(room)
  })
}

/** Fails with what axe-core finds wrong on the page as it stands. */
export async function expectAccessible(page: Page): Promise<void> {
  await page.evaluate(AXE)
  const found = await page.evaluate(async () => {
    const axe = (globalThis as unknown as { axe: Axe }).axe
    const { violations } = await axe.run()
    return violations.map(({ id, nodes }) => `${id}: ${nodes.map((node) => node.html).join(' | ')}`)
  })
  expect(found).toEqual([])
}

/** Fails where the page must be scrolled sideways, once pictures have found their width. */
export async function expectNoSidewaysScrolling(page: Page): Promise<void> {
  const overhang = () =>
    page.evaluate<number>(
      'document.documentElement.scrollWidth - document.documentElement.clientWidth',
    )
  await expect.poll(overhang, { timeout: 5000 }).toBeLessThanOrEqual(0)
}

interface Axe {
  run: () => Promise<{ violations: { id: string; nodes: { html: string }[] }[] }>
}
