import type { Browser, Locator, Page } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { pushDevices } from '@/lib/notices/push-contract'
import type { Role } from '@/lib/members/roles'
import { LAPTOP, launchBrowser, newDevice, open, signInOn } from '@/tests/setup/browser'
import { newClient, signIn } from '@/tests/setup/client'
import { startFakePushService, type FakePushService } from '@/tests/setup/fake-push-service'
import { seedMembers, startServer, startWorker, type Program, type SeededMember, type TestServer } from '@/tests/setup/server'

const MINUTE = 60_000
const SEEN_WITHIN = { timeout: 5000, interval: 200 }
const SOON = { timeout: 30_000, interval: 300 }
// The worker looks and sends every minute; a pass that just missed one is the next one's.
const BY_THE_NEXT_PASS = { timeout: 90_000, interval: 300 }

let service: FakePushService
let server: TestServer
let worker: Program | undefined
let browser: Browser
let members: Record<Role, SeededMember>
let pushEnv: Record<string, string>

beforeAll(async () => {
  service = await startFakePushService()
  pushEnv = { PUSH_EXTRA_HOSTS: service.host, PUSH_CA_FILE: service.caFile }
  server = await startServer({ env: pushEnv })
  members = await seedMembers()
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await Promise.all([worker?.stop(), server.stop(), service.stop()])
})

/** A shell of two coats that dry in minutes: what matters here is the way of the work, not its length. */
async function openShop() {
  const { buildFoundry, buildPlace, buildRecipe, buildTree } = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const foundry = await buildFoundry()
  const place = await buildPlace({ name: 'Fan rack', airSpeedMps: 3 })
  const recipeVersionId = await buildRecipe(foundry, [
    { kind: 'backup', stucco: 'coarse', need: 0.1, guard: 'safe' },
    { kind: 'seal', stucco: 'none', need: 0.1, target: 0.05 },
  ])
  const trees = [
    await buildTree(foundry, { recipeVersionId, placeId: place.id }),
    await buildTree(foundry, { recipeVersionId, placeId: place.id }),
  ] as const
  const { token } = await issueSensorToken({ sensorId: foundry.sensorId }, { member: null, clock: { now: () => Date.now() } })
  return { trees, token }
}

/** Touches as a hand does: the floor takes a second touch within 400 ms for a bounce of the finger. */
async function touch(key: Locator): Promise<void> {
  await key.page().waitForTimeout(450)
  await key.tap()
}

const rowOf = (page: Page, treeId: string) => page.locator(`[data-tree-row="${treeId}"]`)

it('does the whole job: dip, dry, be told, dip again, look over, release', async () => {
  const { trees, token } = await openShop()
  const [first, second] = trees
  const tablet = await newDevice(browser, server.baseUrl)
  const laptop = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(tablet.page, members.operator)
  await signInOn(laptop.page, members.supervisor)

  // A phone of the operator's subscribes; the push service is ours, since a browser subscribes only to its vendor's.
  const phone = await signIn(server.baseUrl, members.operator.email, members.operator.password)
  const { publicKey: vapidPublicKey } = pushDevices.parse(await (await phone.fetch('/api/v1/push/subscriptions')).json())
  const device = service.subscribe(vapidPublicKey)
  const subscribed = await phone.send('POST', '/api/v1/push/subscriptions', {
    endpoint: device.endpoint,
    keys: device.keys,
    scope: 'every tree',
    vapidPublicKey,
  })
  expect([200, 201]).toContain(subscribed.status)

  // A run of two trees, 40 minutes ago. Bare of readings, its coats are unknown.
  await touch(tablet.page.getByRole('button', { name: 'Dip both' }))
  await touch(tablet.page.getByRole('button', { name: '40 minutes ago' }))
  await touch(tablet.page.getByRole('button', { name: 'Log 2 dips' }))
  await tablet.page.getByText(/2 dips logged/).waitFor()
  const drying = (page: Page) => page.getByRole('region', { name: /^Drying/ })
  await expect.poll(() => drying(laptop.page).textContent(), SEEN_WITHIN).toContain(second.tag)
  await expect.poll(() => drying(tablet.page).textContent(), SEEN_WITHIN).toMatch(/Unknown|unknown/)

  // The sensor's readings arrive late, in one batch.
  const now = Date.now()
  const readings = Array.from({ length: 10 }, (_, index) => ({
    measuredAt: now - (45 - index * 5) * MINUTE,
    airTempC: 21,
    relHumidityPct: 50,
  }))
  const sensor = newClient(server.baseUrl)
  const sent = await sensor.fetch('/api/v1/readings', {
    method: 'POST',
    headers: { authorization: `Bearer ${token}`, 'content-type': 'application/json' },
    body: JSON.stringify({ readings }),
  })
  expect(await sent.json()).toMatchObject({ accepted: 10, rejected: [] })
  await expect.poll(() => rowOf(tablet.page, first.id).textContent(), SEEN_WITHIN).toMatch(/Dip now|Waiting/)

  // The worker flags both, and tells the phone.
  worker = startWorker(server.dataDir, pushEnv)
  await expect.poll(() => device.received.map((push) => push.text).join('\n'), BY_THE_NEXT_PASS).toContain(`${first.tag} dry: dip 2`)
  const push = device.received.find((each) => each.text.includes(first.tag))!
  expect(push.ttlSeconds).toBeGreaterThan(0)
  expect(push.topic).not.toBeNull()
  expect(await shownByServiceWorker(laptop.page, push.text)).toContain(`${first.tag} dry: dip 2`)

  // The seal goes on, dries, and is the last: two touches and the time.
  await touch(rowOf(tablet.page, first.id))
  await touch(tablet.page.getByRole('button', { name: '20 minutes ago' }))
  await touch(tablet.page.getByRole('button', { name: /^Log dip 2/ }))
  await tablet.page
    .getByText(/Dip 2 .*logged|1 dip logged|logged/)
    .first()
    .waitFor()

  // The supervisor looks it over and releases it; it leaves the floor.
  await open(laptop.page, `/trees/${first.tag}`)
  await expect.poll(() => laptop.page.textContent('main'), SOON).toMatch(/Dried out/)
  await laptop.page.getByRole('button', { name: 'Looked over' }).click()
  await expect.poll(() => laptop.page.textContent('main'), SOON).toMatch(/Ready for burnout/)
  await open(laptop.page, '/burnout')
  const tagsOnFloor = (tag: string) => tablet.page.getByText(tag, { exact: true }).count()
  await expect.poll(() => tagsOnFloor(first.tag), SOON).toBe(1)
  await laptop.page.getByRole('checkbox', { name: `Release ${first.tag}` }).check()
  await laptop.page.getByRole('button', { name: `Hold to release ${first.tag}` }).focus()
  await laptop.page.keyboard.down('Enter')
  // The key fills for 900 ms while it is held.
  await laptop.page.waitForTimeout(1500)
  await laptop.page.keyboard.up('Enter')
  await expect.poll(() => tagsOnFloor(first.tag), SOON).toBe(0)
  expect(await tagsOnFloor(second.tag)).toBe(1)
  await open(laptop.page, `/trees/${first.tag}`)
  expect(await laptop.page.textContent('main')).toMatch(/Released/)
  expect([...tablet.errors, ...laptop.errors]).toEqual([])
}, 240_000)

/**
 * Hands a decrypted push to the real service worker, as the browser's push client would, and tells what it shows. Asked is the worker:
 * the browser's own list of notifications forgets one that is asked for while it is on its way to the screen.
 */
async function shownByServiceWorker(page: Page, data: string): Promise<string[]> {
  const context = page.context()
  await context.grantPermissions(['notifications'], { origin: server.baseUrl })
  await open(page, '/me')
  await page.evaluate(() => navigator.serviceWorker.register('/sw.js').then(() => navigator.serviceWorker.ready))
  const serviceWorker = context.serviceWorkers()[0] ?? (await context.waitForEvent('serviceworker'))
  await serviceWorker.evaluate(() => {
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- runs in the worker, whose types are not the page's
    const self = globalThis as unknown as { registration: ServiceWorkerRegistration; shown: string[] }
    const show = self.registration.showNotification.bind(self.registration)
    self.shown = []
    self.registration.showNotification = async (title, options) => {
      await show(title, options)
      self.shown.push(title)
    }
  })
  const cdp = await context.newCDPSession(page)
  const registered = new Promise<string>((resolve) => {
    cdp.on('ServiceWorker.workerRegistrationUpdated', ({ registrations }) => {
      const [registration] = registrations
      if (registration) resolve(registration.registrationId)
    })
  })
  await cdp.send('ServiceWorker.enable')
  await cdp.send('ServiceWorker.deliverPushMessage', { origin: server.baseUrl, registrationId: await registered, data })
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- set above
  const shown = () => serviceWorker.evaluate(() => (globalThis as unknown as { shown: string[] }).shown)
  await expect.poll(shown, SOON).not.toEqual([])
  return shown()
}
