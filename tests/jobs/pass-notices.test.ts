import { beforeAll, beforeEach, describe, expect, it } from 'vitest'
import { REOPEN_DWELL_MS } from '@/lib/notices/notice-rules'
import { buildQueue, buildQueueTree, NOW } from '@/tests/factories/queue'

const { passNotices } = await import('@/lib/commands/pass-notices')
const { tellSupervisors } = await import('@/lib/commands/tell-supervisors')
const { Delivery, Notice, TreeEvent, inTransaction } = await import('@/models')
const { forgetNotices, makeCoat, makeDevice, makeDryTree, makeMember, makeShop, watch } = await import('@/tests/factories/notices')

const KEY = 'the key of this server'
const at = (now: number) => ({ vapidPublicKey: KEY, clock: { now: () => now } })
const pass = (trees: Parameters<typeof buildQueue>[0], now = NOW) => passNotices(buildQueue(trees), at(now))
let device = 0
const fakeDevice = () => ({ endpoint: `https://fcm.googleapis.com/${(device += 1)}`, keys: { p256dh: 'p', auth: 'a' } })

let shop: Awaited<ReturnType<typeof makeShop>>
beforeAll(async () => {
  shop = await makeShop()
})
beforeEach(forgetNotices)

describe('passNotices', () => {
  it('opens a notice with its deliveries and its line in the history once, however often it runs', async () => {
    const tree = await makeDryTree(shop)
    const member = await makeMember()
    await makeDevice(fakeDevice(), { memberId: member.id, vapidPublicKey: KEY })
    expect(await pass({ trees: [tree] })).toMatchObject({ opened: 1, deliveries: 1 })
    expect(await pass({ trees: [tree] })).toMatchObject({ opened: 0, closed: 0, deliveries: 0 })
    expect(await Notice.findAll({ raw: true })).toMatchObject([
      { kind: 'coat dry', episode: 1, treeId: tree.id, title: `${tree.tag} dry: dip 6`, closedAt: null },
    ])
    expect(await Delivery.findAll({ raw: true })).toMatchObject([
      { status: 'waiting', memberId: member.id, nextAttemptAt: NOW, expiresAt: NOW + 7_200_000 },
    ])
    expect(await TreeEvent.findAll({ where: { treeId: tree.id } })).toMatchObject([
      { kind: 'notice', memberId: null, detail: { notice: 'coat dry', text: expect.stringContaining(`${tree.tag} dry: dip 6. Backup`) } },
    ])
  })
  it('does the same when two workers look at once', async () => {
    const tree = await makeDryTree(shop)
    await makeDevice(fakeDevice(), { memberId: shop.memberId, vapidPublicKey: KEY })
    await Promise.all([pass({ trees: [tree] }), pass({ trees: [tree] }), pass({ trees: [tree] })])
    expect([await Notice.count(), await Delivery.count()]).toEqual([1, 1])
  })
  it('tells devices for every tree and members who asked about this one, and nobody else', async () => {
    const tree = await makeDryTree(shop)
    const [all, asked, other, outdated, disabled] = await Promise.all(Array.from({ length: 5 }, () => makeMember('crew')))
    await makeDevice(fakeDevice(), { memberId: all!.id, vapidPublicKey: KEY })
    await makeDevice(fakeDevice(), { memberId: asked!.id, vapidPublicKey: KEY, scope: 'watched trees' })
    await makeDevice(fakeDevice(), { memberId: other!.id, vapidPublicKey: KEY, scope: 'watched trees' })
    await makeDevice(fakeDevice(), { memberId: outdated!.id, vapidPublicKey: 'a key of before' })
    await makeDevice(fakeDevice(), { memberId: disabled!.id, vapidPublicKey: KEY })
    const { Member } = await import('@/models')
    await Member.update({ disabledAt: NOW }, { where: { id: disabled!.id } })
    await watch(tree.id, asked!.id)
    await pass({ trees: [tree] })
    const told = (await Delivery.findAll({ raw: true })).map(({ memberId }) => memberId)
    expect(told.toSorted()).toEqual([all!.id, asked!.id].toSorted())
  })
  it('does not call a coat dry that was covered since the floor was read', async () => {
    const tree = await makeDryTree(shop)
    await makeCoat(shop, tree.id, 6)
    expect(await pass({ trees: [tree] })).toMatchObject({ opened: 0 })
  })
  it('takes a call back from whoever was told, and drops what was not sent yet', async () => {
    const tree = await makeDryTree(shop)
    const devices = await Promise.all([1, 2].map(() => makeDevice(fakeDevice(), { memberId: shop.memberId, vapidPublicKey: KEY })))
    await pass({ trees: [tree] })
    await Delivery.update({ status: 'sent', sentAt: NOW }, { where: { subscriptionId: devices[0]!.id } })
    await makeDevice(fakeDevice(), { memberId: shop.memberId, vapidPublicKey: KEY })
    const wet = buildQueueTree({ ...tree, state: 'drying', stateSince: null })
    expect(await pass({ trees: [wet] }, NOW + 60_000)).toMatchObject({ opened: 1, closed: 1, deliveries: 1 })
    const withdrawn = await Notice.findOne({ where: { kind: 'call withdrawn' } })
    expect(await Delivery.findAll({ where: { noticeId: withdrawn!.id }, raw: true })).toMatchObject([{ subscriptionId: devices[0]!.id }])
    expect(await Notice.findOne({ where: { kind: 'coat dry' } })).toMatchObject({ closeReason: 'withdrawn by late data' })
    expect(await Delivery.findOne({ where: { subscriptionId: devices[1]!.id } })).toMatchObject({ status: 'expired' })
    // Dry again after the dwell: a new episode of the same notice.
    await pass({ trees: [tree] }, NOW + 60_000 + REOPEN_DWELL_MS)
    expect((await Notice.findAll({ where: { kind: 'coat dry' }, order: ['episode'] })).map(({ episode }) => episode)).toEqual([1, 2])
  })
  it('tells as one summary what had been true for too long, once', async () => {
    const trees = await Promise.all([200, 300, 400].map((minutesAgo) => makeDryTree(shop, minutesAgo)))
    const [all, asked] = await Promise.all([makeMember(), makeMember()])
    await makeDevice(fakeDevice(), { memberId: all.id, vapidPublicKey: KEY })
    await makeDevice(fakeDevice(), { memberId: asked.id, vapidPublicKey: KEY, scope: 'watched trees' })
    await watch(trees[1]!.id, asked.id)
    expect(await pass({ trees })).toMatchObject({ opened: 3, late: 3, deliveries: 2 })
    expect(await pass({ trees })).toMatchObject({ opened: 0, deliveries: 0 })
    const summaries = await Notice.findAll({ where: { kind: 'summary' }, order: ['subjectType'] })
    expect(summaries).toMatchObject([
      { subjectType: 'floor', title: '3 notices from before', closedAt: NOW },
      { subjectType: 'member', subjectId: asked.id, title: `${trees[1]!.tag} dry: dip 6` },
    ])
  })
  it('tells a single late one by itself', async () => {
    await makeDevice(fakeDevice(), { memberId: shop.memberId, vapidPublicKey: KEY })
    expect(await pass({ trees: [await makeDryTree(shop, 200)] })).toMatchObject({ opened: 1, late: 0, deliveries: 1 })
  })
  it('leaves nothing half done', async () => {
    const tree = await makeDryTree(shop)
    await makeDevice(fakeDevice(), { memberId: shop.memberId, vapidPublicKey: KEY })
    const failing = inTransaction(async () => {
      await pass({ trees: [tree] })
      throw new Error('power cut')
    })
    await expect(failing).rejects.toThrow('power cut')
    expect([await Notice.count(), await Delivery.count(), await TreeEvent.count({ where: { treeId: tree.id } })]).toEqual([0, 0, 0])
  })
})

describe('tellSupervisors', () => {
  it('reaches those who run the room on every device of theirs, inside the dip', async () => {
    process.env['VAPID_PUBLIC_KEY'] = KEY.padEnd(80, '.')
    Object.assign(process.env, {
      NEXTAUTH_SECRET: 'a secret of the tests, long enough',
      NEXTAUTH_URL: 'http://localhost:3000',
      UV_THREADPOOL_SIZE: '16',
      VAPID_PRIVATE_KEY: 'k'.repeat(43),
      VAPID_SUBJECT: 'mailto:shellroom@marramlane.example',
    })
    const vapidPublicKey = process.env['VAPID_PUBLIC_KEY']
    const tree = await makeDryTree(shop)
    const members = { operator: await makeMember('operator'), supervisor: await makeMember('supervisor'), owner: await makeMember('owner') }
    for (const { id } of Object.values(members)) await makeDevice(fakeDevice(), { memberId: id, vapidPublicKey, scope: 'watched trees' })
    await tellSupervisors(
      {
        coatId: tree.newestCoat!.id,
        treeId: tree.id,
        tag: tree.tag,
        title: tree.title,
        placeName: 'Rack B',
        coatNumber: 6,
        deviations: ['Held', 'Dipped 40 min before it was safe'],
        reason: 'Pour tomorrow',
      },
      { clock: { now: () => NOW } },
    )
    expect((await Delivery.findAll({ raw: true })).map(({ memberId }) => memberId).toSorted()).toEqual(
      [members.supervisor.id, members.owner.id].toSorted(),
    )
    expect(await Notice.findOne()).toMatchObject({
      kind: 'deviation',
      urgency: 'high',
      closedAt: NOW,
      title: `${tree.tag}: dip 6 not as planned`,
    })
  })
})
