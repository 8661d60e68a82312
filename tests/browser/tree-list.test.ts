import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { LAPTOP, launchBrowser, newDevice, open, PHONE, signInOn } from '@/tests/setup/browser'
import { seedMember, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

let server: TestServer
let browser: Browser
let supervisor: SeededMember
let page: Page
let errors: string[]

beforeAll(async () => {
  server = await startServer()
  supervisor = await seedMember('supervisor')
  const { buildFoundry, buildRecipe, buildTree } = await import('@/tests/factories/shell-room')
  const { inTransaction } = await import('@/models')
  const foundry = await buildFoundry()
  const recipeVersionId = await buildRecipe(foundry)
  await inTransaction(async () => {
    for (let index = 1; index <= 61; index += 1) {
      const tree = await buildTree(foundry, { recipeVersionId, since: Date.now() - 3_600_000 })
      await tree.update({ tag: `T-${index}`, ...(index === 61 ? { releasedAt: Date.now() - 1000 } : {}) })
    }
  })
  browser = await launchBrowser()
  ;({ page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false }))
  await signInOn(page, supervisor)
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

const tags = () => page.locator('[data-rows] .c-tag').allInnerTexts()
const focused = () => page.evaluate(() => document.activeElement?.getAttribute('href') ?? document.activeElement?.id ?? '')

describe('the list of trees', () => {
  it('is sorted, turned over and paged by its address, which can be gone back to', async () => {
    await open(page, '/trees?sort=tag')
    await expect.poll(tags).toHaveLength(50)
    expect((await tags())[0]).toBe('T-1')
    await page.getByRole('link', { name: 'Next page' }).click()
    await page.waitForURL('**/trees?sort=tag&page=2')
    await expect.poll(async () => (await tags())[0]).toBe('T-51')
    await page.getByRole('columnheader', { name: 'Tree' }).getByRole('link').click()
    await page.waitForURL('**/trees?sort=tag&order=desc')
    await expect.poll(async () => (await tags())[0]).toBe('T-60')
    await page.goBack()
    await expect.poll(async () => (await tags())[0]).toBe('T-1')
  })

  it('finds among those that left too', async () => {
    await open(page, '/trees')
    await page.getByLabel('Find a tree').fill('T-61')
    await page.getByRole('button', { name: 'Find', exact: true }).click()
    await page.getByRole('link', { name: 'Look among those that left' }).click()
    await expect.poll(tags).toEqual(['T-61'])
  })

  it('goes out as a file with what is shown', async () => {
    await open(page, '/trees?q=T-6')
    const [download] = await Promise.all([page.waitForEvent('download'), page.getByRole('link', { name: 'This list as CSV' }).click()])
    const { readFile } = await import('node:fs/promises')
    const [head = '', ...lines] = (await readFile(await download.path(), 'utf8')).trim().split('\r\n')
    expect(head.split(',').slice(0, 3)).toEqual(['tag', 'piece', 'state'])
    expect(lines.map((line) => line.split(',')[0])).toEqual(['T-6', 'T-60'])
  })

  it('answers the keyboard: find, along the rows and back, open, go, list of keys, leave', async () => {
    await open(page, '/burnout')
    await page.keyboard.press('/')
    await page.waitForURL('**/trees#find-tree')
    await expect.poll(focused).toBe('find-tree')
    await page.keyboard.type('T-1')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/trees?q=T-1')
    await expect.poll(async () => (await tags()).length).toBe(11)
    await page.keyboard.press('Escape')
    await page.keyboard.press('ArrowDown')
    await page.keyboard.press('ArrowDown')
    expect(await focused()).toBe('/trees/T-10')
    await page.keyboard.press('ArrowUp')
    expect(await focused()).toBe('/trees/T-1')
    await page.keyboard.press('ArrowUp')
    expect(await focused()).toBe('find-tree')
    await page.keyboard.press('ArrowDown')
    await page.keyboard.press('Enter')
    await page.waitForURL('**/trees/T-1')
    await page.keyboard.press('g')
    await page.keyboard.press('b')
    await page.waitForURL('**/burnout')
    await page.keyboard.press('?')
    await page.getByRole('dialog', { name: 'Keys of the office' }).waitFor()
    await page.keyboard.press('Escape')
    await page.getByRole('dialog', { name: 'Keys of the office' }).waitFor({ state: 'hidden' })
  })

  it('fits a phone', async () => {
    await page.setViewportSize(PHONE)
    await open(page, '/trees')
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(PHONE.width)
    expect(errors).toEqual([])
  })
})
