import type { Browser, Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { LAPTOP, launchBrowser, newDevice, open } from '@/tests/setup/browser'
import { newClient } from '@/tests/setup/client'
import { startServer, type TestServer } from '@/tests/setup/server'

const MINUTE = 60_000
const SOON = { timeout: 30_000, interval: 300 }

let server: TestServer
let browser: Browser

beforeAll(async () => {
  server = await startServer()
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

/** Touches as a hand does: the floor takes a second touch within 400 ms for a bounce of the finger. */
async function touch(key: Locator): Promise<void> {
  await key.page().waitForTimeout(450)
  await key.tap()
}

const press = (page: Page, name: string | RegExp) => page.getByRole('button', { name, exact: typeof name === 'string' }).click()
const heading = (page: Page, name: string | RegExp) => page.getByRole('heading', { name }).first().waitFor()

it('leads from nothing to the first dip', async () => {
  const { page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  const late = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })

  // Two come at once; the first one makes the account, the other one reads that it is made.
  await open(late.page, '/')
  await open(page, '/')
  await page.waitForURL('**/first-run')
  await press(page, 'Make the owner’s account')
  await page.getByText('Type the name.').waitFor()
  const typeIn = async (form: Page, name: string) => {
    await form.getByLabel('Your name').fill(name)
    await form.getByLabel('E-mail').fill(`${name.toLowerCase()}@foundry.example`)
    await form.getByLabel('Password').fill('three foxes in the attic')
  }
  await typeIn(page, 'Aurelia')
  await press(page, 'Make the owner’s account')
  await heading(page, 'Your foundry')
  await typeIn(late.page, 'Bo')
  await press(late.page, 'Make the owner’s account')
  await late.page.getByText('made already').waitFor()

  // The foundry and its hours.
  await page.getByLabel('Name', { exact: true }).fill('Holm Street Foundry')
  await page.getByLabel('Altitude').fill('640')
  await press(page, 'Save the settings')
  await heading(page, 'When do you dip?')
  await press(page, 'Save the hours')

  // Two baths, by the names that are proposed.
  await heading(page, 'The face bath')
  await press(page, 'Add the bath')
  await heading(page, 'The backup bath')
  // Left here and taken up again: nothing is lost.
  await open(page, '/trees')
  await page.waitForURL('**/first-run')
  await heading(page, 'The backup bath')
  await press(page, 'Add the bath')
  await heading(page, 'Backup slurry')
  await press(page, 'Go on')

  // A sensor and its token, shown once.
  await heading(page, 'What reads the air?')
  await press(page, 'Add a sensor')
  await page.getByLabel('Name', { exact: true }).fill('Shell room')
  await page.getByLabel('How its readings come').selectOption('logger')
  await press(page, 'Add the sensor')
  await press(page, /Issue a token/)
  const token = (await page.locator('.token-plate code').first().textContent()) ?? ''
  expect(token).toMatch(/^kw_/)
  await press(page, 'Go on')

  // Back, and on again.
  await heading(page, 'Where do trees hang?')
  await page.getByRole('link', { name: 'Back' }).click()
  await heading(page, 'What reads the air?')
  await press(page, 'Go on')
  await heading(page, 'Where do trees hang?')
  await press(page, 'Add a place')
  await page.getByLabel('Name', { exact: true }).fill('Rack A')
  await page.getByLabel('Air speed, fans on').fill('1.2')
  await page.getByLabel('Air speed, fans off').fill('0.1')
  await press(page, 'Add hours on Monday')
  await page.getByLabel('Monday, fans on from').fill('06:00')
  await page.getByLabel('Monday, fans on to').fill('18:00')
  await press(page, 'Same every day')
  await press(page, 'Add the place')
  await heading(page, 'Rack A')
  await press(page, 'Go on')

  // Recipes to begin with, and somebody to work with.
  await heading(page, 'Recipes to begin with')
  await page.getByRole('checkbox', { name: /Heavy shell/ }).uncheck()
  await press(page, 'Take 2 recipes and go on')
  await heading(page, 'Who works here?')
  await page.getByLabel('Name', { exact: true }).fill('Bo Lind')
  await page.getByLabel('E-mail').fill('bo@foundry.example')
  await page.getByRole('radio', { name: /operator/ }).check()
  await press(page, 'Add the member')
  expect(await page.locator('.first-password-word').textContent()).not.toBe('')
  await press(page, 'Go on')

  // The first tree.
  await heading(page, 'Holm Street Foundry is ready')
  await press(page, 'Add the first tree')
  await page.waitForURL('**/trees/new')
  await page.getByLabel('Recipe').selectOption({ index: 1 })
  await page.getByLabel('Where it hangs').selectOption({ label: 'Rack A' })
  await page.getByLabel('Work').fill('Fox Asleep')
  await page.getByLabel('Edition').fill('1')
  await page.getByLabel('Wax mass').fill('1.4')
  await page.getByLabel('Cup', { exact: true }).selectOption('wax')
  await page.getByLabel('Cup volume').fill('0.3')
  await page.getByLabel('Deepest recess').selectOption('none')
  await page.getByLabel('Spacing on the tree').selectOption('open')
  await press(page, 'Add the tree')
  await page.waitForURL(/\/trees\/[A-Z]+-\d+$/)
  const tag = page.url().split('/').at(-1) ?? ''

  // Its wax is looked over.
  await page.getByLabel('Washed').check()
  for (const tick of ['At room temperature', 'Cup and handle firm', 'Vents and core pins in']) await page.getByLabel(tick).check()
  await press(page, 'Pass intake')
  await expect.poll(() => page.textContent('main'), SOON).toContain('Wax ready')

  // The logger sends, with the token that was shown.
  const now = Date.now()
  const readings = Array.from({ length: 6 }, (_, index) => ({ measuredAt: now - index * 5 * MINUTE, airTempC: 21, relHumidityPct: 50 }))
  const sent = await newClient(server.baseUrl).fetch('/api/v1/readings', {
    method: 'POST',
    headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
    body: JSON.stringify({ readings }),
  })
  expect(await sent.json()).toMatchObject({ accepted: 6 })

  // At the wall tablet: the first dip, and it dries in the tide.
  const tablet = await newDevice(browser, server.baseUrl)
  await open(tablet.page, '/sign-in')
  await tablet.page.getByLabel('E-mail').fill('aurelia@foundry.example')
  await tablet.page.getByLabel('Password').fill('three foxes in the attic')
  await press(tablet.page, 'Sign in')
  await tablet.page.waitForURL('**/floor')
  await touch(tablet.page.locator('[data-tree-row]').filter({ hasText: tag }))
  await touch(tablet.page.getByRole('button', { name: /^Log dip 1/ }))
  await tablet.page
    .getByText(/logged/)
    .first()
    .waitFor()
  await expect.poll(() => tablet.page.getByRole('region', { name: /^Drying/ }).textContent(), SOON).toContain(tag)
  expect([...errors, ...tablet.errors]).toEqual([])
}, 240_000)
