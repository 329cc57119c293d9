// The whole way of one study: sign in, define, run, explore, export; and the workbook's numbers are the page's.
import { readFileSync } from 'node:fs'
import ExcelJS from 'exceljs'
import type { Browser, BrowserContext, Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, inject, test } from 'vitest'
import { launch, openPage, signIn } from './browser.ts'

let browser: Browser
let context: BrowserContext
let page: Page
let complaints: string[]

beforeAll(async () => {
  browser = await launch()
  context = await browser.newContext({ viewport: { width: 1440, height: 900 }, acceptDownloads: true })
  ;({ page, complaints } = await openPage(context))
})
afterAll(async () => {
  await browser.close()
})

test('an engineer signs in through the identity provider and finds the demo', async () => {
  await page.goto(`${inject('applicationUrl')}/`)
  await page.waitForURL('**/sign-in')
  await signIn(page, 'Engineer')
  expect(await page.getByRole('link', { name: /Chiller line K4/ }).count()).toBeGreaterThan(0)
})

let study = ''

/** Ticks a box; the live result may move the page between aiming and clicking, so until it is ticked. */
const tick = (box: Locator) =>
  expect
    .poll(
      async () => {
        await box.check({ timeout: 2000 }).catch(() => {})
        return box.isChecked()
      },
      { timeout: 20_000 },
    )
    .toBe(true)

test('defines a study over tube, rows, subcooling and fluid, and is told what is missing until it fits', async () => {
  await page
    .getByRole('link', { name: /Chiller line K4/ })
    .first()
    .click()
  await page.waitForURL(/\/projects\/[0-9a-f-]+$/)
  await page.getByText('New study', { exact: true }).click()
  await page.getByLabel('A blank study').fill('To be named')
  await page.getByRole('button', { name: 'Start blank' }).click()
  await page.waitForURL(/\/studies\/[0-9a-f-]+\/define$/)
  study = /studies\/([0-9a-f-]+)/.exec(page.url())?.[1] ?? ''
  await page.getByRole('button', { name: 'Run the study' }).first().waitFor()
  expect(await page.locator('h1').textContent()).toMatch(/missing before this can run/)

  await page.getByLabel('Study name').fill('Rows against subcooling')
  await page.getByLabel('Condensing fluid: one value or several').selectOption('list')
  for (const fluid of ['R134a, A1', 'Propane'])
    await tick(page.getByRole('checkbox', { name: new RegExp(fluid, 'i') }))
  await page.getByRole('textbox', { name: /^Saturation temperature/ }).fill('40')
  await page.getByRole('textbox', { name: /^Duty/ }).fill('300')
  await page.getByText('a given wall subcooling').click()
  await page.getByLabel('Wall subcooling: one value or several').selectOption('range')
  await page.locator('[name="vary.drive.wallSubcooling.from"]').fill('3')
  await page.locator('[name="vary.drive.wallSubcooling.to"]').fill('7')
  await page.locator('[name="vary.drive.wallSubcooling.count"]').fill('5')
  await tick(page.getByRole('checkbox', { name: 'Name the coolant that would hold it' }))
  await page.locator('select[name="coolant.id"]').selectOption('water')
  await page.locator('[name="coolant.inletTemperature"]').fill('84,2 degF')
  await tick(page.getByRole('checkbox', { name: /Vary over standard tubes/ }))
  await tick(page.getByRole('group', { name: 'Standard tubes' }).getByRole('checkbox').nth(6))
  await tick(page.getByRole('group', { name: 'Standard tubes' }).getByRole('checkbox').nth(9))
  await page.locator('select[name="tube.material"]').selectOption('copper')
  await page.locator('[name="bundle.pitchRatio"]').fill('1.25')
  await page.getByLabel('Rows: one value or several').selectOption('list')
  await page.locator('[name="vary.bundle.rows.values"]').fill('8; 12; 16')
  await page.locator('[name="bundle.tubesPerRow"]').fill('14')
  await page.locator('[name="bundle.passes"]').fill('2')
  await page.locator('[name="limits.coolantPressureDrop.max"]').fill('60 kPa')
  await page.locator('h1', { hasText: '60 points, ready to run' }).waitFor()

  // The draft outlives a reload.
  await page.locator('[data-save="kept"]').waitFor()
  await page.waitForTimeout(1200)
  await page.reload()
  await page.locator('h1', { hasText: '60 points, ready to run' }).waitFor()
  expect(await page.locator('[name="coolant.inletTemperature"]').inputValue()).toBe('84,2 degF')
})

test('keeps what was typed when a field is wrong, and names field and remedy', async () => {
  const field = page.locator('[name="limits.coolantPressureDrop.max"]')
  await field.fill('sixty')
  await field.blur()
  await page
    .getByText(/1 thing|One thing/)
    .first()
    .waitFor()
  await page.getByRole('button', { name: 'Run the study' }).first().click()
  expect(await field.inputValue()).toBe('sixty')
  expect(await page.locator('[data-fault="limits.coolantPressureDrop.max"]').textContent()).toMatch(/sixty/)
  await field.fill('60')
  await page.locator('h1', { hasText: 'ready to run' }).waitFor()
})

test('runs it and explores the finding', async () => {
  await page.getByRole('button', { name: 'Run the study' }).first().click()
  await page.waitForURL(/\/run/)
  await page.goto(`${inject('applicationUrl')}/studies/${study}/run`)
  await expect.poll(() => page.locator('h1').textContent(), { timeout: 60_000 }).toMatch(/Least of|No point/)
  await page.goto(`${inject('applicationUrl')}/studies/${study}/explore`)
  expect(await page.locator('h1').textContent()).toMatch(/^Least of 60 points within 60\D*kPa: [\d.]+/)
  expect(await page.locator('tbody tr').count()).toBeGreaterThan(5)
})

test('keeps the view under a name and comes back to it', async () => {
  const address = `${inject('applicationUrl')}/studies/${study}/explore`
  await page.goto(`${address}?sort=tubeLength&dir=down&all=1`)
  await page.locator('summary[aria-label="Saved views"]').click()
  await page.getByLabel('Save this view as').fill('Longest first')
  await page.getByRole('button', { name: 'Save', exact: true }).click()
  await page.getByRole('link', { name: 'Longest first' }).waitFor()
  await page.goto(address)
  await page.locator('summary[aria-label="Saved views"]').click()
  await page.getByRole('link', { name: 'Longest first' }).click()
  await page.waitForURL(/sort=tubeLength/)
  await page.goto(address)
})

test('takes the workbook, whose numbers are the page’s', async () => {
  const area = Number(/kPa: ([\d.]+)/.exec((await page.locator('h1').textContent()) ?? '')?.[1])
  const point = Number(
    (
      await page
        .locator('tbody tr[aria-selected="true"], tbody tr[data-selected="true"]')
        .first()
        .locator('th,td')
        .first()
        .textContent()
    )?.replace(/\D/g, ''),
  )
  await page.getByRole('button', { name: 'Export' }).click()
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    page.getByRole('menuitem', { name: /workbook/i }).click(),
  ])
  const book = new ExcelJS.Workbook()
  await book.xlsx.load(readFileSync(await download.path()) as unknown as ArrayBuffer)
  const sheet = book.getWorksheet('Points')
  const heads = sheet?.getRow(1).values as string[]
  expect(sheet?.rowCount).toBe(61)
  let least = Number.POSITIVE_INFINITY
  let at = -1
  sheet?.eachRow((row, n) => {
    if (n === 1) return
    const value = row.getCell(heads.indexOf('outside_area_m2')).value
    if (
      row.getCell(heads.indexOf('outcome')).value !== 'evaluated' ||
      row.getCell(heads.indexOf('limits_not_met')).value
    )
      return
    if (typeof value === 'number' && value < least) {
      least = value
      at = Number(row.getCell(heads.indexOf('point')).value)
    }
  })
  expect(at).toBe(point)
  expect(Number(least.toPrecision(3))).toBe(area)
})

test('nothing complained on the way', () => {
  expect(complaints.filter((text) => !/favicon/.test(text))).toEqual([])
})
