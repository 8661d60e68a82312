import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { LAPTOP, launchBrowser, newDevice, PHONE, signInOn } from '@/tests/setup/browser'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

let server: TestServer
let browser: Browser
let page: Page
let errors: string[]

beforeAll(async () => {
  server = await startServer()
  const member = await seedMember('supervisor')
  const { buildAir, buildFoundry, buildMember, buildTree, dipBody } = await import('@/tests/factories/shell-room')
  const { logDips } = await import('@/lib/commands/log-dips')
  const foundry = await buildFoundry()
  const clock = { now: () => Date.now() }
  await buildAir(foundry.sensorId, Date.now() - 26 * 3_600_000, Date.now(), { airTempC: 20, relHumidityPct: 70 })
  const dipper = await buildMember('operator')
  for (let index = 1; index <= 2; index += 1) {
    const tree = await buildTree(foundry, { since: Date.now() - 48 * 3_600_000 })
    await tree.update({ tag: `W-${index}` })
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { dippedAt: Date.now() - 10 * 60_000 })
    await logDips(body, { member: dipper, clock })
  }
  browser = await launchBrowser()
  ;({ page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false }))
  await signInOn(page, member)
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

const answer = () => page.locator('.room-answer')
const rows = () => page.locator('.what-if-table tbody tr')
const turn = async (dial: string, key: 'ArrowLeft' | 'ArrowRight', times: number) => {
  await page.locator('.room-what-if').getByLabel(dial, { exact: true }).focus()
  for (let press = 0; press < times; press += 1) await page.keyboard.press(key)
}

describe('what another air would do to the room', () => {
  it('is told by the keyboard alone: before and after of each tree, and how many are dry in time', async () => {
    await page.goto('/room')
    await answer().getByText('Turn a dial').waitFor()
    expect(await rows().count()).toBe(0)
    await turn('Humidity', 'ArrowLeft', 15)
    await expect.poll(() => answer().innerText()).toContain('before the next opening')
    await expect.poll(() => answer().innerText()).toContain('Dehumidifier to 55 %')
    expect(await answer().innerText()).toContain('Times not calibrated yet')
    expect(await rows().count()).toBe(2)
    for (const row of await rows().all()) {
      const words = await row.innerText()
      expect(words.match(/likely .*safe /gs)).not.toBeNull()
      expect(words).toContain('sooner')
    }
  })

  it('says why not to do it where it harms the wax, and shows the times all the same', async () => {
    await turn('Temperature', 'ArrowRight', 14)
    await expect.poll(() => answer().innerText()).toContain('Not this air')
    expect(await answer().innerText()).toMatch(/Heat, W-1 and W-2: 27\.0.°C, limit 26\.0.°C/)
    expect(await answer().innerText()).not.toContain('Dehumidifier')
    expect(await rows().first().innerText()).toContain('heat')
    await page.getByRole('button', { name: 'Back to the air as it comes' }).press('Enter')
    await answer().getByText('Turn a dial').waitFor()
  })

  it('fits a phone, and so do a fortnight and a year', async () => {
    await page.setViewportSize(PHONE)
    const sideways = () => page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth)
    await turn('Air at the trees', 'ArrowRight', 3)
    await rows().first().waitFor()
    await expect.poll(sideways).toBe(0)
    for (const [name, range] of [
      ['14 days', '14d'],
      ['One year', '1y'],
    ]) {
      await page.getByRole('link', { name, exact: true }).click()
      await page.waitForURL(`**/room?sensor=*&range=${range}`)
      await page.getByRole('heading', { name: new RegExp(`Fast and slow, ${name}`, 'i') }).waitFor()
      await expect.poll(sideways).toBe(0)
    }
    expect(errors).toEqual([])
  })
})
