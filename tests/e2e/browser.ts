// A browser for the tests: Debian's Chromium, headless, with nothing running in its background.
import { type Browser, type BrowserContext, chromium, type Page } from 'playwright-core'
import { inject } from 'vitest'

export const launch = (): Promise<Browser> =>
  chromium.launch({
    executablePath: inject('chromiumPath'),
    args: [
      '--no-sandbox',
      '--disable-quic',
      '--no-first-run',
      '--disable-background-networking',
      '--disable-component-update',
      '--disable-sync',
    ],
  })

export type Role = 'Engineer' | 'Lead' | 'Analyst' | 'Administrator'

/** A page with everything it complains about collected: script errors, refused loads, failed requests. */
export async function openPage(context: BrowserContext): Promise<{ page: Page; complaints: string[] }> {
  const page = await context.newPage()
  const complaints: string[] = []
  page.on('pageerror', (error) => complaints.push(`script: ${error.message}`))
  page.on('console', (message) => {
    if (message.type() === 'error') complaints.push(`console: ${message.text()}`)
  })
  page.on('response', (response) => {
    if (response.status() >= 400) complaints.push(`${response.status()} ${response.url()}`)
  })
  return { page, complaints }
}

/** Through the identity provider as one of the demo's people. */
export async function signIn(page: Page, role: Role): Promise<void> {
  await page.goto(`${inject('applicationUrl')}/sign-in`)
  await page.getByRole('button', { name: new RegExp(`^${role}`) }).click()
  await page.waitForURL('**/projects')
}
