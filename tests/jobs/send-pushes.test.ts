import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Clock } from '@/lib/core/clock'
import type { PushMessage } from '@/lib/notices/push-contract'
import type { PushSender } from '@/lib/server/push-sender'
import { buildQueue, NOW } from '@/tests/factories/queue'
import { startFakePushService, type FakeDevice, type FakePushService } from '@/tests/setup/fake-push-service'
import { pushSettings } from '@/tests/setup/push-settings'

const { passNotices } = await import('@/lib/commands/pass-notices')
const { claimDeliveries } = await import('@/lib/commands/claim-deliveries')
const { recordDelivery } = await import('@/lib/commands/record-delivery')
const { sendTestPush } = await import('@/lib/commands/send-test-push')
const { sendPushes } = await import('@/jobs/send-pushes')
const { webPushSender } = await import('@/lib/server/push-sender')
const { Delivery, Member, PushSubscription } = await import('@/models')
const { forgetNotices, makeDevice, makeDryTree, makeShop } = await import('@/tests/factories/notices')

const MINUTE_MS = 60_000
let service: FakePushService
let vapidPublicKey: string
let shop: Awaited<ReturnType<typeof makeShop>>
let now = NOW
const clock: Clock = { now: () => now }
let sender: PushSender

beforeAll(async () => {
  service = await startFakePushService()
  ;({ vapidPublicKey } = pushSettings(service))
  sender = webPushSender({ clock })
  shop = await makeShop()
  return () => service.stop()
})
beforeEach(async () => {
  now = NOW
  service.refusals.length = 0
  await forgetNotices()
})

const subscribe = async (mode: FakeDevice['mode'] = 'ok') => {
  const device = service.subscribe(vapidPublicKey)
  device.mode = mode
  return { device, row: await makeDevice(device, { memberId: shop.memberId, vapidPublicKey }) }
}
const dry = async (minutesAgo = 5) => {
  const tree = await makeDryTree(shop, minutesAgo)
  await passNotices(buildQueue({ trees: [tree] }), { vapidPublicKey, clock })
  return tree
}
const send = (parts: Partial<Parameters<typeof sendPushes>[0]> = {}) =>
  sendPushes({ sender, random: () => 0, isSuspended: () => false, ...parts }).run({ clock, isStopping: () => false })
const only = async () => {
  const rows = await Delivery.findAll({ raw: true })
  expect(rows).toHaveLength(1)
  return rows[0]!
}

describe('a push that arrives', () => {
  it('says the words, names the tree and may be shown late by its time to live', async () => {
    const { device, row } = await subscribe()
    const tree = await dry()
    now += 10 * MINUTE_MS
    expect(await send()).toMatchObject({ sent: 1 })
    const [push] = device.received
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- compared whole below
    const message = JSON.parse(push!.text) as PushMessage
    expect(message).toEqual({
      title: `${tree.tag} dry: dip 6`,
      body: 'Backup slurry, coarse. Rack B. Otter Gate, panel 2. Safe since 13:55, likely since 13:05.',
      tag: tree.id.replaceAll('-', ''),
      path: `/trees/${tree.tag}`,
      at: NOW,
    })
    expect(push).toMatchObject({ topic: message.tag, ttlSeconds: 110 * 60, headers: { urgency: 'normal' } })
    expect(Buffer.byteLength(push!.text)).toBeLessThan(1024)
    expect(await only()).toMatchObject({ status: 'sent', attempts: 1, sentAt: now })
    expect(await PushSubscription.findByPk(row.id)).toMatchObject({ lastOkAt: now, failingSince: null })
    expect(service.refusals).toEqual([])
  })
  it('is sent once by two workers', async () => {
    const { device } = await subscribe()
    await dry()
    await Promise.all([send(), send(), send()])
    expect(device.requests).toBe(1)
  })
  it('is decrypted every time, over a hundred', async () => {
    const devices = await Promise.all(Array.from({ length: 25 }, () => subscribe()))
    const trees = await Promise.all([1, 2, 3, 4].map(() => makeDryTree(shop)))
    await passNotices(buildQueue({ trees }), { vapidPublicKey, clock })
    expect(await send()).toMatchObject({ sent: 100 })
    expect(devices.map(({ device }) => device.received.length)).toEqual(devices.map(() => 4))
    expect(service.refusals).toEqual([])
  })
})

describe('a crash', () => {
  it('between the notice and the send loses nothing', async () => {
    const { device } = await subscribe()
    await dry()
    // Another process, later: all it has is the database.
    now += 3 * MINUTE_MS
    await send()
    expect(device.received).toHaveLength(1)
  })
  it('between the send and its record doubles at most one, on the same card', async () => {
    const { device } = await subscribe()
    await dry()
    const [claimed] = await claimDeliveries({ clock, limit: 1 })
    const options = { ttlSeconds: 60, urgency: claimed!.urgency, topic: claimed!.message.tag }
    await sender.send(claimed!, JSON.stringify(claimed!.message), options)
    now += 30_000
    expect(await send()).toMatchObject({ sent: 0 })
    now += 31_000
    expect(await send()).toMatchObject({ sent: 1 })
    expect(await send()).toMatchObject({ sent: 0 })
    expect(device.received).toHaveLength(2)
    expect(service.undelivered(device)).toHaveLength(1)
    // The first sender wakes up again: its lease is lost, so it writes nothing.
    await recordDelivery(claimed!, { kind: 'our fault', words: 'x', detail: 'x' }, { clock, jitter: 0 })
    expect(await only()).toMatchObject({ status: 'sent', attempts: 2 })
  })
})

describe('a device that is gone', () => {
  it.each(['gone', '404'] as const)('is taken off the list: %s', async (mode) => {
    const { row } = await subscribe(mode)
    await dry()
    expect(await send()).toMatchObject({ gone: 1 })
    expect(await PushSubscription.findByPk(row.id)).toBeNull()
    expect(await only()).toMatchObject({ status: 'gone' })
  })
  it('stays when it subscribed again while the old send was under way', async () => {
    const { device, row } = await subscribe('gone')
    await dry()
    const renewing: PushSender = {
      send: async (...call) => {
        const outcome = await sender.send(...call)
        now += 10
        await PushSubscription.update({ createdAt: now }, { where: { id: row.id } })
        device.mode = 'ok'
        return outcome
      },
    }
    await send({ sender: renewing })
    expect(await PushSubscription.findByPk(row.id)).not.toBeNull()
    await send()
    expect(device.received).toHaveLength(1)
  })
  it('is not sent to after its member was disabled', async () => {
    const { device } = await subscribe()
    await dry()
    await Member.update({ disabledAt: now }, { where: { id: shop.memberId } })
    await send()
    await Member.update({ disabledAt: null }, { where: { id: shop.memberId } })
    expect(device.requests).toBe(0)
    expect(await only()).toMatchObject({ status: 'gone' })
  })
})

describe('a push service in trouble', () => {
  it('is left alone for as long as it asks', async () => {
    const { device, row } = await subscribe('429')
    device.retryAfter = '300'
    await dry()
    await send()
    expect(await only()).toMatchObject({ status: 'waiting', nextAttemptAt: NOW + 300_000, lastError: 'The push service asks for a pause.' })
    expect(await PushSubscription.findByPk(row.id)).toMatchObject({ failingSince: NOW })
    now += 299_000
    await send()
    expect(device.requests).toBe(1)
    device.mode = 'ok'
    now += 1000
    await send()
    expect(device.received).toHaveLength(1)
    expect(await PushSubscription.findByPk(row.id)).toMatchObject({ failingSince: null, lastError: null })
  })
  it.each(['500', 'reset'] as const)('is asked again after 30 s, 2 min and 10 min until it is too late: %s', async (mode) => {
    const { device } = await subscribe(mode)
    await dry()
    const waits: number[] = []
    for (let attempt = 0; attempt < 4; attempt += 1) {
      await send()
      const { nextAttemptAt } = await only()
      waits.push(nextAttemptAt - now)
      now = nextAttemptAt
    }
    expect(waits).toEqual([30_000, 120_000, 600_000, 600_000])
    now = NOW + 121 * MINUTE_MS
    await send()
    expect(device.requests).toBe(4)
    expect(await only()).toMatchObject({ status: 'expired' })
  })
  it('that refuses our keys keeps the device and says so in our words', async () => {
    const { row } = await subscribe('403')
    await dry()
    expect(await send()).toMatchObject({ 'our fault': 1 })
    expect(await only()).toMatchObject({ status: 'failed', lastError: 'The push service does not accept the keys of this server.' })
    expect(await PushSubscription.findByPk(row.id)).toMatchObject({ failingSince: NOW, lastError: expect.not.stringContaining('Bad') })
  })
  it('that never ends is cut off within 10 s, and holds up nobody else', { timeout: 15_000 }, async () => {
    const devices = [await subscribe('hang'), await subscribe('drip'), await subscribe('ok')]
    await dry()
    const began = performance.now()
    expect(await send()).toMatchObject({ retry: 2, sent: 1 })
    expect(performance.now() - began).toBeLessThan(10_900)
    expect(devices.map(({ device }) => device.requests)).toEqual([1, 1, 1])
  })
})

describe('before a send', () => {
  it('waits for one pass after the clock has jumped', async () => {
    const { device } = await subscribe()
    await dry()
    expect(await send({ isSuspended: () => true })).toEqual({ suspended: true })
    expect(device.requests).toBe(0)
  })
  it('refuses an address that no push service has, although it is stored', async () => {
    await makeDevice(
      { endpoint: 'https://169.254.169.254/latest', keys: service.subscribe(vapidPublicKey).keys },
      { memberId: shop.memberId, vapidPublicKey },
    )
    await dry()
    expect(await send()).toMatchObject({ 'our fault': 1 })
  })
})

describe('a test of one device', () => {
  it.each([
    ['ok', true, /took it/],
    ['gone', false, /does not know this device/],
    ['403', false, /does not accept the keys/],
    ['429', false, /asks for a pause/],
  ] as const)('says what the push service answered: %s', async (mode, isSent, words) => {
    const { row } = await subscribe(mode)
    const answer = await sendTestPush({ id: row.id }, { memberId: shop.memberId, sender, clock })
    expect(answer).toEqual({ isSent, words: expect.stringMatching(words) })
  })
  it('is for own devices only', async () => {
    const { row } = await subscribe()
    const test = sendTestPush({ id: row.id }, { memberId: crypto.randomUUID(), sender, clock })
    await expect(test).rejects.toMatchObject({ code: 'not_found' })
  })
})
