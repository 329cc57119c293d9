// Three people and one decision: the engineer submits, the lead returns it, the engineer amends it, the lead accepts;
// the e-mails were sent, and the analyst's workbook says what the record says.
import { readFileSync } from 'node:fs'
import ExcelJS from 'exceljs'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { definition } from '#tests/crash/fixtures.ts'
import { launch, openPage, type Role, signIn } from './browser.ts'

let browser: Browser
const complaints: string[] = []
const pages = {} as Record<'Engineer' | 'Lead' | 'Analyst', Page>
const address = inject('applicationUrl')
const NAME = 'Decision bench'
let study = ''

async function personOf(role: Role): Promise<Page> {
  const context = await browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
  const opened = await openPage(context)
  // What was complained of is read at the end, whoever met it.
  opened.page.on('close', () => complaints.push(...opened.complaints))
  await signIn(opened.page, role)
  return opened.page
}

beforeAll(async () => {
  browser = await launch()
  pages.Engineer = await personOf('Engineer')
  pages.Lead = await personOf('Lead')
  pages.Analyst = await personOf('Analyst')
})
afterAll(async () => {
  await browser.close()
})

async function run(page: Page): Promise<void> {
  await page.goto(`${address}/studies/${study}/define`)
  await page.getByRole('button', { name: 'Run the study' }).first().click()
  await page.waitForURL(/\/run/)
  await expect.poll(() => page.locator('h1').textContent(), { timeout: 60_000 }).toMatch(/Least of/)
}

test('the engineer runs a study and puts its best point forward', async () => {
  const page = pages.Engineer
  await page
    .getByRole('link', { name: /Test stand B/ })
    .first()
    .click()
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  await page.getByText('New study', { exact: true }).click()
  const file = JSON.stringify({ ...definition({ velocities: 6, inlets: 6 }), name: NAME })
  await page
    .locator('input[type="file"]')
    .setInputFiles({ name: 'bench.json', mimeType: 'application/json', buffer: Buffer.from(file) })
  await page.getByRole('button', { name: 'Start from the file' }).click()
  await page.waitForURL(/\/studies\/[0-9a-f-]+\/define$/)
  study = /studies\/([0-9a-f-]+)/.exec(page.url())?.[1] ?? ''
  await run(page)
  await page.goto(`${address}/studies/${study}/decide`)
  await page.getByLabel('Note to the lead').fill('The least within the limit.\nSee the vapour side.')
  await page.getByRole('button', { name: 'Ask for a review' }).click()
  await page.locator('.tag', { hasText: 'review asked' }).first().waitFor()
  await page.getByLabel('Your comment').fill('@Lead, the velocity is at its upper end.')
  await page.getByRole('button', { name: 'Comment', exact: true }).click()
  await page.getByText('the velocity is at its upper end').waitFor()
})

test('the analyst reads it all and is offered no decision', async () => {
  const page = pages.Analyst
  await page.goto(`${address}/studies/${study}/decide`)
  await page.getByText('A lead of the project accepts it').waitFor()
  expect(await page.getByRole('button', { name: 'Accept it' }).count()).toBe(0)
})

test('the lead is told, finds the review, and returns it with a reason', async () => {
  const page = pages.Lead
  await page.goto(`${address}/projects`)
  await page.getByRole('link', { name: '2 new notices' }).click()
  await page.getByRole('button', { name: /asks for a review of “Decision bench”/ }).click()
  await page.waitForURL(/\/decide/)
  await page.getByRole('button', { name: 'Return it' }).click()
  // Without a reason it is not returned, and says so at the field.
  await page
    .getByText(/say what should change/)
    .first()
    .waitFor()
  await page.getByLabel('Reason').fill('Keep the pressure drop under 35 kPa.')
  await page.getByRole('button', { name: 'Return it' }).click()
  await page.locator('.tag', { hasText: 'returned' }).first().waitFor()
})

test('the engineer reads the reason, amends the limit, runs again and asks again', async () => {
  const page = pages.Engineer
  await page.goto(`${address}/notices`)
  await page.getByRole('button', { name: /returned “Decision bench”/ }).click()
  await page.waitForURL(/\/decide/)
  await page.getByText('Keep the pressure drop under 35 kPa.').waitFor()
  await page.goto(`${address}/studies/${study}/define`)
  await page.locator('[name="limits.coolantPressureDrop.max"]').fill('35 kPa')
  await page.locator('h1', { hasText: 'ready to run' }).waitFor()
  await page.locator('[data-save="kept"]').waitFor()
  await page.waitForTimeout(1200)
  await run(page)
  await page.goto(`${address}/studies/${study}/decide`)
  await page.getByRole('button', { name: 'Ask for a review' }).click()
  await page.locator('.tag', { hasText: 'review asked' }).first().waitFor()
})

let record = ''
let area = ''

test('the lead accepts it; the record stands and is the baseline', async () => {
  const page = pages.Lead
  await page.goto(`${address}/studies/${study}/decide`)
  await page.getByLabel('Reason').fill('Agreed at 35 kPa.')
  await page.getByRole('button', { name: 'Accept it' }).click()
  await page.waitForURL(/\/records\//)
  record = page.url()
  await page.locator('h1', { hasText: 'Accepted:' }).waitFor()
  const title = await page.locator('h1').textContent()
  area = /Accepted: ([\d.]+)/.exec(title ?? '')?.[1] ?? ''
  expect(Number(area)).toBeGreaterThan(0)
  expect(await page.getByText('baseline', { exact: true }).count()).toBe(1)
  await page.getByText('(verified)').waitFor()
  await page.getByText('Agreed at 35 kPa.').waitFor()
})

test('the e-mails lie in the catcher, each once', async () => {
  const page = pages.Lead
  await expect
    .poll(
      async () => {
        await page.goto(`${address}/caught-mail`)
        return page.locator('h2').allTextContents()
      },
      { timeout: 20_000, interval: 1000 },
    )
    .toHaveLength(7)
  // Who may accept was asked twice: the lead and the administrator.
  const subjects = await page.locator('h2').allTextContents()
  expect(subjects.filter((text) => /asks for a review of “Decision bench”/.test(text))).toHaveLength(4)
  expect(subjects.filter((text) => /mentioned you/.test(text))).toHaveLength(1)
  expect(subjects.filter((text) => /returned “Decision bench”/.test(text))).toHaveLength(1)
  expect(subjects.filter((text) => /accepted “Decision bench”/.test(text))).toHaveLength(1)
})

test('the analyst takes the workbook, and its best point is the record’s', async () => {
  const page = pages.Analyst
  await page.goto(record)
  expect(await page.locator('h1').textContent()).toContain(`Accepted: ${area}`)
  expect(await page.getByRole('button', { name: 'Make it the baseline' }).count()).toBe(0)
  const row = page.locator('tr', { hasText: /^Outside area/ }).first()
  const printed = /[\d.]+/.exec((await row.locator('td.value').textContent()) ?? '')?.[0]
  await page.goto(`${address}/studies/${study}/decide`)
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('link', { name: 'Workbook' }).click(),
  ])
  const book = new ExcelJS.Workbook()
  await book.xlsx.load(readFileSync(await download.path()) as unknown as ArrayBuffer)
  const areas: number[] = []
  book.getWorksheet('Summary')?.eachRow((row) => {
    if (row.getCell(1).value === 'outside_area_m2') areas.push(Number(row.getCell(2).value))
  })
  expect(areas.map((value) => Number(value.toPrecision(5)))).toContain(Number(printed))
})

test('a removed member is turned away at the next request, in the open tab too', async () => {
  const page = pages.Lead
  const project = /\/projects\/[0-9a-f-]+/.exec(record)?.[0] ?? ''
  await page.goto(`${address}${project}`)
  await page.getByText(/\d members/).click()
  await page.getByText('Remove', { exact: true }).nth(1).click()
  await page
    .getByRole('button', { name: 'Remove Analyst' })
    .click({ timeout: 1000 })
    .catch(async () => {
      await page.locator('summary[aria-label="Remove Analyst"]').click()
      await page.getByRole('button', { name: 'Remove Analyst' }).click()
    })
  await expect.poll(() => page.locator('summary[aria-label="Remove Analyst"]').count()).toBe(0)
  await pages.Analyst.getByRole('link', { name: 'Explore' }).first().click()
  await pages.Analyst.getByText(/not a member of its project/).waitFor()
})

test('nothing else complained on the way', async () => {
  for (const page of Object.values(pages)) await page.close()
  // The refused return, and the removed analyst.
  expect(complaints.filter((text) => !/favicon|status of 400|status of 404|^40[04] /.test(text))).toEqual([])
})
