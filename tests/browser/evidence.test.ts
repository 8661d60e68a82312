import { setTimeout as sleep } from 'node:timers/promises'
import type { Browser, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import type { Queue, QueueTree } from '@/lib/queue/contract'
import { LAPTOP, launchBrowser, newDevice, open, PHONE, signInOn, TABLET } from '@/tests/setup/browser'
import { seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

let server: TestServer
let browser: Browser
let members: Record<Role, SeededMember>
let hollow: string
let plain: string
const HOUR = 3_600_000
const MINUTE = 60_000

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  browser = await launchBrowser()
  const { buildAir, buildFoundry, buildRecipe, buildTree, dipBody } = await import('@/tests/factories/shell-room')
  const { logDips } = await import('@/lib/commands/log-dips')
  const foundry = await buildFoundry()
  const now = Date.now()
  await buildAir(foundry.sensorId, now - 30 * HOUR, now)
  const { id, name } = members.operator
  const dipped = async (recessClass: 'none' | 'closed core', dippedAt: number) => {
    const recipeVersionId = await buildRecipe(
      foundry,
      [1, 2].map(() => ({ kind: 'backup', stucco: 'medium', need: 4 })),
    )
    const tree = await buildTree(foundry, { recipeVersionId, recessClass, since: now - 24 * HOUR })
    const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { dippedAt, bathId: foundry.backupBathId, stucco: 'medium' })
    await logDips(run, { member: { id, name, role: 'operator' }, clock: { now: () => dippedAt } })
    return tree.tag
  }
  hollow = await dipped('closed core', now - 5 * HOUR)
  plain = await dipped('none', now - 2 * HOUR)
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

/** A second press within a moment of the first, at the same spot, counts as an impatient finger. */
const calm = () => sleep(600)

const treeOf = async (page: Page, tag: string): Promise<QueueTree> => {
  const queue = (await (await page.request.get('/api/v1/queue')).json()) as Queue
  return queue.trees.find((tree) => tree.tag === tag)!
}
const likely = async (page: Page, tag: string) => (await treeOf(page, tag)).dry!.likelyAt!

it('a touch, a colour and a surface temperature on the page of a tree move its time, and the page says why', async () => {
  const { page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(page, members.operator)
  await open(page, `/trees/${plain}`)
  const before = await likely(page, plain)
  await page.getByRole('button', { name: 'Felt dry' }).click()
  await page.getByText(/^Noted\. Was likely .*; is likely /).waitFor()
  const felt = await likely(page, plain)
  expect(felt).toBeLessThan(before)
  // A person's word at the spot that dries last frees it.
  expect((await treeOf(page, plain)).state).toBe('dip now')

  await page.getByRole('heading', { name: 'Why this time' }).waitFor()
  await page.getByText(/felt outside: dry\. That alone makes it .* sooner\./).waitFor()
  await page.getByRole('button', { name: 'Withdraw' }).click()
  await expect.poll(async () => Math.abs((await likely(page, plain)) - before) < 3 * MINUTE).toBe(true)

  await page.getByRole('button', { name: 'Weigh, measure, colour' }).click()
  await calm()
  await page.getByRole('button', { name: 'Wet colour' }).click()
  await page
    .getByText(/colour outside: not yet/)
    .first()
    .waitFor()
  const coloured = await likely(page, plain)
  expect(coloured).toBeGreaterThan(before - 3 * MINUTE)

  await page.getByLabel('Surface, outside').fill('hot')
  await page.getByRole('button', { name: 'Note the temperature' }).click()
  await page.getByText('The surface temperature is a number.').waitFor()
  await calm()
  // 21 °C and 50 %: a wet coat would sit at 14.6 °C. Two hours after its dip it is as cold as that.
  await page.getByLabel('Surface, outside').fill('14,7')
  await page.getByRole('button', { name: 'Note the temperature' }).click()
  await page
    .getByText(/surface outside at 14\.7/)
    .first()
    .waitFor()
  await expect.poll(() => likely(page, plain)).toBeGreaterThan(coloured)

  await page.setViewportSize(PHONE)
  // The charts follow a moment later.
  await expect.poll(() => page.evaluate(() => document.documentElement.scrollWidth)).toBeLessThanOrEqual(PHONE.width)
  expect(errors).toEqual([])
})

it('on the tablet: an outside that is dry frees no core, a weighing says why it moves nothing, and a word is withdrawn at once', async () => {
  const { page, errors } = await newDevice(browser, server.baseUrl, { size: TABLET })
  await signInOn(page, members.operator)
  const row = page.locator(`[data-tree-row]`, { hasText: hollow }).first()
  await row.tap()
  await calm()
  await page.getByRole('button', { name: 'How dry?' }).tap()
  await calm()
  await page.getByText('An outside that is dry frees nothing here: the core dries last.').waitFor()
  await page.getByRole('group', { name: 'Outside' }).getByRole('button', { name: 'Felt dry' }).tap()
  await page.getByText(new RegExp(`${hollow}: noted\\.`)).waitFor()
  expect((await treeOf(page, hollow)).word).toBeNull()

  await row.tap()
  await calm()
  await page.getByRole('button', { name: 'How dry?' }).tap()
  await calm()
  await page.getByRole('group', { name: 'In the core' }).getByRole('button', { name: 'Not yet' }).tap()
  await page.getByText(new RegExp(`${hollow}: noted\\.`)).waitFor()
  expect((await treeOf(page, hollow)).word).toMatchObject({ verdict: 'not yet', spot: 'core' })
  await calm()
  await page.getByRole('button', { name: 'Withdraw' }).tap()
  await page.getByText('Withdrawn: the time stands as it did before.').waitFor()
  expect((await treeOf(page, hollow)).word).toBeNull()

  await row.tap()
  await calm()
  await page.getByRole('button', { name: 'How dry?' }).tap()
  await calm()
  await page.getByRole('button', { name: 'Weigh it' }).tap()
  await calm()
  await page.getByRole('button', { name: 'Note it' }).tap()
  await page.getByText('Type the weight in kg.').waitFor()
  for (const digit of ['4', ',', '2']) await page.getByRole('button', { name: digit, exact: true }).tap()
  expect(await page.getByLabel('Weight').inputValue()).toBe('4,2')
  await calm()
  await page.getByRole('button', { name: 'Note it' }).tap()
  await page.getByText(/It moves no time\. Nobody weighed it after its stucco\./).waitFor()
  expect(errors).toEqual([])
})
