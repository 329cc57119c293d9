// Every page by axe-core's rules, light and dark, and within the width of a phone.
import { AxeBuilder } from '@axe-core/playwright'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { definition } from '#tests/crash/fixtures.ts'
import { launch, signIn } from './browser.ts'

const address = inject('applicationUrl')
const DESK = { width: 1440, height: 900 }
const PHONE = { width: 360, height: 740 }
let browser: Browser
let page: Page

beforeAll(async () => {
  browser = await launch()
  // axe is put into pages whose policy allows no foreign script; colours in the middle of a transition are no colours.
  const context = await browser.newContext({ viewport: DESK, bypassCSP: true, reducedMotion: 'reduce' })
  page = await context.newPage()
})
afterAll(() => browser.close())

async function violations(): Promise<string[]> {
  const { violations } = await new AxeBuilder({ page }).setLegacyMode().analyze()
  return violations.map(
    ({ id, nodes }) => `${id}: ${nodes.map(({ target }) => target.join(' ')).join(' | ')}`,
  )
}

/** What is wrong with a page in either theme and on a phone. */
async function faultsOf(path: string): Promise<string[]> {
  await page.setViewportSize(DESK)
  await page.emulateMedia({ colorScheme: 'light' })
  const answer = await page.goto(`${address}${path}`)
  expect(answer?.status(), path).toBe(200)
  await page.locator('h1').first().waitFor()
  const faults = (await violations()).map((text) => `${path} light: ${text}`)
  await page.emulateMedia({ colorScheme: 'dark' })
  faults.push(...(await violations()).map((text) => `${path} dark: ${text}`))
  await page.setViewportSize(PHONE)
  // A plot takes a moment to follow the window.
  const width = () => page.evaluate(() => document.documentElement.scrollWidth)
  for (let waited = 0; waited < 20 && (await width()) > PHONE.width; waited++) await page.waitForTimeout(100)
  if ((await width()) > PHONE.width) faults.push(`${path} at ${PHONE.width} px is ${await width()} px wide`)
  return faults
}

async function noFaults(paths: readonly string[]): Promise<void> {
  const faults: string[] = []
  for (const path of paths) faults.push(...(await faultsOf(path)))
  expect(faults).toEqual([])
}

let project = ''
let study = ''

test('before anyone signed in', async () => {
  await noFaults(['/sign-in'])
  await page.setViewportSize(DESK)
})

test('a study with points is made', async () => {
  await signIn(page, 'Administrator')
  await page
    .getByRole('link', { name: /Test stand B/ })
    .first()
    .click()
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  project = new URL(page.url()).pathname
  await page.getByText('New study', { exact: true }).click()
  const file = JSON.stringify({ ...definition({ velocities: 6, inlets: 6 }), name: 'Seen by everyone' })
  await page
    .locator('input[type="file"]')
    .setInputFiles({ name: 'seen.json', mimeType: 'application/json', buffer: Buffer.from(file) })
  await page.getByRole('button', { name: 'Start from the file' }).click()
  await page.waitForURL(/\/studies\/[0-9a-f-]+\/define$/)
  study = new URL(page.url()).pathname.replace(/\/define$/, '')
  await page.getByRole('button', { name: 'Run the study' }).first().click()
  await page.waitForURL(/\/run/)
  await expect.poll(() => page.locator('h1').textContent(), { timeout: 60_000 }).toMatch(/Least of/)
})

test('projects and a study at each stage', () =>
  noFaults([
    '/projects',
    project,
    `${project}/history`,
    `${project}/compare?study=${study.slice('/studies/'.length)}`,
    `${study}/define`,
    `${study}/run`,
    `${study}/explore`,
    `${study}/decide`,
    `${study}/optimum`,
    `${study}/points/0`,
  ]))

test('the library', async () => {
  await page.goto(`${address}/library`)
  const first = async (folder: string) =>
    (await page.locator(`a[href^="/library/${folder}/"]`).first().getAttribute('href')) ?? ''
  await noFaults(['/library', await first('fluids'), await first('methods'), '/library/validation'])
})

test('a person’s own pages and the administrator’s', () =>
  noFaults(['/account', '/notices', '/admin/people', '/admin/audit']))
