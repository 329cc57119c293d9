// The optimum of a shipped study in the browser: asked for, worked out, explained, checked, with its band and its front.
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, test } from 'vitest'
import { launch, openPage, signIn } from './browser.ts'

let browser: Browser
let page: Page
let complaints: string[]

beforeAll(async () => {
  browser = await launch()
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 } })
  ;({ page, complaints } = await openPage(context))
  await signIn(page, 'Engineer')
})
afterAll(() => browser.close())

test('an engineer has the optimum of a study worked out and reads why it is one', async () => {
  await page
    .getByRole('link', { name: /Binary plant Hollin/ })
    .first()
    .click()
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  await page
    .getByRole('link', { name: /mmonia/ })
    .first()
    .click()
  await page.waitForURL(/\/studies\//)
  await page.goto(page.url().replace(/(\/studies\/[0-9a-f-]+).*/, '$1/optimum'))
  await page.getByRole('button', { name: 'Find the least outside area' }).click()
  await page.locator('h1', { hasText: /^Optimum: [\d.]+/ }).waitFor({ timeout: 90_000 })
  // Ammonia's shipped study is made so that the coolant velocity stops it.
  expect(await page.locator('header', { hasText: 'Optimum' }).last().textContent()).toContain(
    'Coolant velocity binds',
  )
  for (const title of [
    'What its limits cost',
    'One step away',
    'The best with each tube',
    'How sure the number is',
    'The least that is enough in nine of ten cases',
    'Checked: nothing better was found',
  ])
    expect(await page.getByRole('heading', { name: title }).count(), title).toBe(1)
})

test('and draws its front', async () => {
  await page.getByRole('button', { name: 'Draw the front' }).click()
  await page.locator('figure[aria-label^="Front of outside area"]').waitFor({ timeout: 120_000 })
  expect(complaints.filter((text) => !/favicon/.test(text))).toEqual([])
})
