import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { LAPTOP, launchBrowser, newDevice, open, signInOn } from '@/tests/setup/browser'
import { makeDataDir, seedMember, startProgram, startServer, testEnv, type SeededMember, type TestServer } from '@/tests/setup/server'

let dataDir: string
let server: TestServer
let browser: Browser
let owner: SeededMember

beforeAll(async () => {
  dataDir = await makeDataDir()
  process.env['DATA_DIR'] = dataDir
  const { buildFoundry, buildRecipe } = await import('@/tests/factories/shell-room')
  const { database } = await import('@/models')
  await buildRecipe(await buildFoundry())
  owner = await seedMember('owner')
  // A restore refuses while anything has the records open, and this process counts.
  await database.close()
  server = await startServer({ dataDir })
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

async function addTree(page: Page, tag: string): Promise<void> {
  await open(page, '/trees/new')
  const field = (name: string) => page.locator(`[name="${name}"]`)
  await field('tag').fill(tag)
  await field('pieces.0.workTitle').fill(`Work of ${tag}`)
  await field('waxMassKg').fill('2.4')
  await field('cupKind').selectOption('wax')
  await field('cupVolumeL').fill('0.3')
  await field('recessClass').selectOption('none')
  await field('spacing').selectOption('open')
  await page.getByRole('button', { name: 'Add the tree' }).click()
  await page.waitForURL(`**/trees/${tag}`)
}

it('goes back to a backup: what was there then is there, what came after is not, and the page says so', async () => {
  const { page } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(page, owner)
  await addTree(page, 'T-1')
  await open(page, '/upkeep')
  await page.getByRole('button', { name: 'Back up now' }).click()
  await page.getByText(/^Backup made, /).waitFor()
  await addTree(page, 'T-2')
  await open(page, '/trees')
  await page.getByText('T-2', { exact: true }).first().waitFor()

  await server.stop()
  const restore = startProgram(['jobs/restore.mjs', 'newest', '--set-aside'], testEnv(dataDir))
  expect(await restore.exited, restore.output()).toBe(0)
  expect(restore.output()).toContain('Restored and proved')
  server = await startServer({ dataDir })

  const after = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  // The cookie of before is worth nothing: its session may have been ended since the backup.
  await after.context.addCookies((await page.context().cookies()).map((cookie) => ({ ...cookie })))
  await open(after.page, '/trees')
  await after.page.waitForURL('**/sign-in**')
  await signInOn(after.page, owner)
  await open(after.page, '/trees')
  await after.page.getByText('T-1', { exact: true }).first().waitFor()
  expect(await after.page.getByText('T-2', { exact: true }).count()).toBe(0)
  await open(after.page, '/upkeep')
  const plate = after.page.locator('.upkeep-restore')
  await plate.getByText(/^The records were restored from the backup of \w{3} \d+ \w{3}, \d\d:\d\d\.$/).waitFor()
  expect(await plate.textContent()).toMatch(/kilnward-[\dT-]+Z-by-hand\.sqlite/)
  expect(after.errors).toEqual([])
})
