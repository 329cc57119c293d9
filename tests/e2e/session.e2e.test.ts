// A session that ends in the middle of a form: what was typed is there again after signing in.
import pg from 'pg'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { launch, signIn } from './browser.ts'

let browser: Browser
let page: Page

beforeAll(async () => {
  browser = await launch()
  page = await (await browser.newContext({ viewport: { width: 1280, height: 900 } })).newPage()
})
afterAll(() => browser.close())

async function endSessions(): Promise<void> {
  const client = new pg.Client({ connectionString: inject('applicationDatabaseUrl') })
  await client.connect()
  await client.query(`update session set revoked_at = now() where person_id in
    (select id from person where email = 'analyst@example.com' or email = 'engineer@example.com')`)
  await client.end()
}

test('the page says so, leads to sign-in, and comes back to the form as it was typed', async () => {
  await signIn(page, 'Engineer')
  await page
    .getByRole('link', { name: /Binary plant Hollin/ })
    .first()
    .click()
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  await page.getByText('New study', { exact: true }).click()
  await page.getByLabel('A blank study').fill('Typed while signed out')
  await page.getByRole('button', { name: 'Start blank' }).click()
  await page.waitForURL(/\/define$/)
  await page.locator('[data-save="kept"]').waitFor()
  await endSessions()
  await page.locator('[name="bundle.pitchRatio"]').fill('1.333')
  await page.getByRole('heading', { name: 'You are signed out' }).waitFor()
  await page.getByRole('link', { name: 'Sign in' }).click()
  await page.getByRole('button', { name: /^Engineer/ }).click()
  await page.waitForURL(/\/define$/)
  await expect.poll(() => page.locator('[name="bundle.pitchRatio"]').inputValue()).toBe('1.333')
  await page.locator('[data-save="kept"]').waitFor()
  await page.reload()
  expect(await page.locator('[name="bundle.pitchRatio"]').inputValue()).toBe('1.333')
})
