import { setTimeout as sleep } from 'node:timers/promises'
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

const LIVE_WITHIN_MS = 30_000

/**
 * Opens a page and waits until its scripts have taken over: a key that is pressed before is lost, or does what its form does without.
 *
 * @throws {Error} after half a minute.
 */
export async function open(page: Page, path: string): Promise<void> {
  await page.goto(path)
  const deadline = Date.now() + LIVE_WITHIN_MS
  // Asked again and again from here: a wait inside the page would build code from text, which the policy forbids.
  while (!(await page.evaluate(isLive).catch(() => false))) {
    if (Date.now() > deadline) throw new Error(`The scripts of ${page.url()} did not take over.`)
    await sleep(50)
  }
}

/** Whether React has every element that a person can press or type into. Runs in the page, so it stands alone. */
function isLive(): boolean {
  const controls = [...document.querySelectorAll('body > :first-child, a, button, form, input, select, textarea')]
  return controls.every((element) => Object.keys(element).some((key) => key.startsWith('__react')))
}

/** Signs in through the form, as a person does, and waits for the floor. */
export async function signInOn(page: Page, { email, password }: { email: string; password: string }): Promise<void> {
  await open(page, '/sign-in')
  await page.getByLabel('E-mail').fill(email)
  await page.getByLabel('Password').fill(password)
  await page.getByRole('button', { name: 'Sign in' }).click()
  await page.waitForURL('**/floor')
}
