import type { Browser } from 'playwright-core'
import { afterAll, beforeAll, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import type { Queue } from '@/lib/queue/contract'
import { LAPTOP, launchBrowser, newDevice, signInOn } from '@/tests/setup/browser'
import { seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

let server: TestServer
let browser: Browser
let members: Record<Role, SeededMember>

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  browser = await launchBrowser()
})
afterAll(async () => {
  await browser.close()
  await server.stop()
})

it('switches the fans of a place off on the Room page: its tree dries later, the floor says so, and the history who', async () => {
  const { buildAir, buildFoundry, buildPlace, buildTree, dipBody, HOUR } = await import('@/tests/factories/shell-room')
  const { logDips } = await import('@/lib/commands/log-dips')
  const { FanHours } = await import('@/models')
  const foundry = await buildFoundry()
  const place = await buildPlace({ name: 'Fan rack', sensorId: foundry.sensorId, airSpeedMps: 1.5, airSpeedFansOffMps: 0.1 })
  // Day and night, so that the test does not mind the hour.
  await FanHours.bulkCreate([1, 2, 3, 4, 5, 6, 7].map((weekday) => ({ placeId: place.id, weekday, onMinute: 0, offMinute: 1440 })))
  const now = Date.now()
  await buildAir(foundry.sensorId, now - 30 * HOUR, now)
  const tree = await buildTree(foundry, { placeId: place.id, since: now - 24 * HOUR })
  const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: place.id }], { dippedAt: now - HOUR })
  const { id, name } = members.operator
  await logDips(run, { member: { id, name, role: 'operator' }, clock: { now: () => now - HOUR } })

  const { page, errors } = await newDevice(browser, server.baseUrl, { size: LAPTOP, hasTouch: false })
  await signInOn(page, members.supervisor)
  const dry = async () => {
    const queue = (await (await page.request.get('/api/v1/queue')).json()) as Queue
    return queue.trees.find((one) => one.id === tree.id)?.dry
  }
  const before = await dry()
  await page.goto('/room')
  await page.getByRole('button', { name: 'Fan rack: fans are off now' }).click()
  await page.getByText(/^said by .*, until somebody says otherwise$/).waitFor()
  await page.getByText('Fans off', { exact: true }).waitFor()
  const after = await dry()
  expect(after!.likelyAt! - before!.likelyAt!).toBeGreaterThan(HOUR / 4)
  expect(after!.safeAt!).toBeGreaterThan(before!.safeAt!)

  // The floor takes it back with one touch.
  await page.goto('/floor')
  await page.locator('.strip-room').click()
  await page.getByRole('button', { name: 'Fan rack: by the timetable again' }).click()
  await page.getByText('Fan rack: fans by the timetable again.').waitFor()
  expect(Math.abs((await dry())!.likelyAt! - before!.likelyAt!)).toBeLessThan(3 * 60_000)

  await page.goto('/history')
  await page.getByText('Fans of Fan rack switched off, until somebody says otherwise.').waitFor()
  await page.getByText('Fans of Fan rack by the timetable again: on now.').waitFor()
  expect(errors).toEqual([])
})
