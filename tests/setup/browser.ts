import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core'

// Without these, Chromium looks up its vendor's hosts at every start.
const ARGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
]

export function launchBrowser(): Promise<Browser> {
  return chromium.launch({ executablePath: process.env['CHROMIUM_PATH'] ?? '/usr/bin/chromium', args: ARGS })
}

type Size = { width: number; height: number }
export const TABLET: Size = { width: 1280, height: 800 }
export const LAPTOP: Size = { width: 1440, height: 900 }
export const PHONE: Size = { width: 390, height: 844 }

/** A device of its own: cookies, size, touch. Errors of its pages are collected, so that a test can insist on none. */
export async function newDevice(
  browser: Browser,
  baseUrl: string,
  { size = TABLET, hasTouch = true }: { size?: Size; hasTouch?: boolean } = {},
): Promise<{ context: BrowserContext; page: Page; errors: string[] }> {
  const context = await browser.newContext({ baseURL: baseUrl, viewport: size, hasTouch })
  const page = await context.newPage()
  const errors: string[] = []
  page.on('pageerror', (error) => errors.push(error.message))
  page.on('console', (message) => {
    if (message.type() === 'error') errors.push(message.text())
  })
  return { context, page, errors }
}

/** Signs in through the form, as a person does, and waits for the floor. */
export async function signInOn(page: Page, { email, password }: { email: string; password: string }): Promise<void> {
  await page.goto('/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password').fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL('**/floor')
}
