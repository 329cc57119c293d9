// The keyboard alone, from signing in to a workbook: every stop on the way shows that it has the focus.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { launch } from './browser.ts'

let browser: Browser
let page: Page
const unseen = new Set<string>()

beforeAll(async () => {
  browser = await launch()
  const context = await browser.newContext({
    viewport: { width: 1440, height: 900 },
    acceptDownloads: true,
    reducedMotion: 'reduce',
  })
  page = await context.newPage()
})
afterAll(() => browser.close())

/** The element that has the focus: what it is called, and whether that can be seen at it, its label or its band. */
const stop = () =>
  page.evaluate(() => {
    const at = document.activeElement
    // A headline takes the focus after moving to a page; nobody can tab to it.
    if (!(at instanceof HTMLElement) || at === document.body || at.tabIndex < 0) return null
    const outlined = (element: Element | null | undefined) => {
      if (!element) return false
      const style = getComputedStyle(element)
      return style.outlineStyle !== 'none' && Number.parseFloat(style.outlineWidth) > 0
    }
    const band = at.querySelector('.bundle-band')
    return {
      // biome-ignore lint/performance/useDomNodeTextContent: what is not rendered is not part of the name
      name: at.getAttribute('aria-label') || at.innerText.trim() || at.getAttribute('name') || '',
      field: at.getAttribute('name'),
      seen:
        outlined(at) ||
        outlined(at.closest('label')) ||
        (band !== null && getComputedStyle(band).stroke !== 'none'),
    }
  })

/** One key, and the stop it leads to. */
async function press(key: string) {
  await page.keyboard.press(key)
  const now = await stop()
  if (now && !now.seen) unseen.add(`${new URL(page.url()).pathname}: ${now.name}`)
  return now
}

/** Tab by tab to the element of this name; a field goes by its form name. */
async function reach(name: RegExp): Promise<void> {
  for (let tabs = 0; tabs < 250; tabs += 1) {
    const now = await press('Tab')
    if (now && (name.test(now.name) || name.test(now.field ?? ''))) return
  }
  throw new Error(`No stop called ${name} on ${page.url()}`)
}

test('signs in and starts from an example', async () => {
  await page.goto(`${inject('applicationUrl')}/sign-in`)
  await reach(/^Engineer/)
  await page.keyboard.press('Enter')
  await page.waitForURL('**/projects')
  await reach(/Test stand B/)
  await page.keyboard.press('Enter')
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  await reach(/^New study$/)
  await page.keyboard.press('Space')
  await reach(/^Start from the example Ammonia/)
  await page.keyboard.press('Enter')
  await page.waitForURL(/\/studies\/[0-9a-f-]+\/define$/)
  await page.locator('h1', { hasText: /7.056 points, ready to run/ }).waitFor()
})

test('changes what is swept and runs it', async () => {
  await reach(/^vary\.drive\.velocity\.count$/)
  await page.keyboard.press('Control+a')
  await page.keyboard.type('2')
  await page.locator('h1', { hasText: '672 points, ready to run' }).waitFor()
  await reach(/^Run the study$/)
  await page.keyboard.press('Enter')
  await page.waitForURL(/\/run/)
  await expect.poll(() => page.locator('h1').textContent(), { timeout: 60_000 }).toMatch(/Least of/)
})

test('explores it and takes the workbook from a menu', async () => {
  await reach(/^Explore\b/)
  await page.keyboard.press('Enter')
  await page.waitForURL(/\/explore/)
  await page.locator('.points-table tbody tr').first().waitFor()
  await reach(/^Export$/)
  await page.keyboard.press('Enter')
  await page.getByRole('menuitem', { name: /^Workbook/ }).waitFor()
  for (let steps = 0; steps < 5 && !/^Workbook/.test((await stop())?.name ?? ''); steps += 1)
    await press('ArrowDown')
  const [download] = await Promise.all([page.waitForEvent('download'), page.keyboard.press('Enter')])
  expect(download.suggestedFilename()).toMatch(/\.xlsx$/)
})

test('every stop could be seen', () => {
  expect([...unseen]).toEqual([])
})
