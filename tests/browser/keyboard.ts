import { type Locator, type Page } from 'playwright-core'

/** Whether an element has the focus. */
export function hasFocus(element: Locator): Promise<boolean> {
  return element.evaluate((one: unknown) => {
    const { document } = globalThis as unknown as { document: { activeElement: unknown } }
    return one === document.activeElement
  })
}

/** Presses Tab until `target` has the focus, as somebody without a mouse does. */
export async function tabTo(page: Page, target: Locator): Promise<void> {
  for (let presses = 0; presses < 200; presses++) {
    if (await hasFocus(target)) return
    await page.keyboard.press('Tab')
  }
  throw new Error(`Tab never reaches ${target.toString()}`)
}

/** Types over what a field holds, with keys alone. */
export async function typeInto(page: Page, field: Locator, text: string): Promise<void> {
  await tabTo(page, field)
  await page.keyboard.press('Control+A')
  await page.keyboard.type(text)
}
