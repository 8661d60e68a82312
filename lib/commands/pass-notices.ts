import { Op } from 'sequelize'
import { openNotice } from '@/lib/commands/open-notice'
import type { Clock } from '@/lib/core/clock'
import { NOTICE_CLASS, type NoticeClose, type NoticeDraft, type NoticeKey, type OpenNotice } from '@/lib/notices/notice'
import { isLate, noticeChanges, REOPEN_DWELL_MS } from '@/lib/notices/notice-rules'
import { summaryText } from '@/lib/notices/notice-text'
import { pushAudiences, type Recipient } from '@/lib/queries/push-recipients'
import type { Queue } from '@/lib/queue/contract'
import { Coat, Delivery, inTransaction, Notice } from '@/models'

export type NoticePass = { opened: number; closed: number; late: number; deliveries: number }

/**
 * One look at the floor: opens and closes notices, and lays out what has to be sent, in one transaction.
 * A second pass over the same floor does nothing.
 *
 * What had been true for longer than it is worth hearing (the worker was down, the foundry is new) is told as one summary.
 */
export function passNotices(queue: Queue, { vapidPublicKey, clock }: { vapidPublicKey: string; clock: Clock }): Promise<NoticePass> {
  return inTransaction(async () => {
    const now = clock.now()
    const changes = noticeChanges({ queue, open: await openNotices(), closed: await restingNotices(now), now })
    const drafts = await stillTrue(changes.open)
    const lateOnes = drafts.filter((draft) => isLate(draft, now))
    // A single one speaks for itself: its text says since when.
    const late = lateOnes.length > 1 ? new Set(lateOnes) : new Set<NoticeDraft>()
    let deliveries = 0
    // Opened before anything closes: a call is taken back from whoever was told, which the closing below forgets.
    for (const draft of drafts) {
      deliveries += await openNotice({ draft, vapidPublicKey, clock, ...(late.has(draft) && { recipients: [] }) })
    }
    deliveries += await tellSummaries([...late], { vapidPublicKey, clock })
    for (const close of changes.close) await closeNotice(close, now)
    return { opened: drafts.length, closed: changes.close.length, late: late.size, deliveries }
  })
}

async function openNotices(): Promise<OpenNotice[]> {
  const rows = await Notice.findAll({ where: { closedAt: null } })
  // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- only this program writes kinds and subjects
  return rows.map(({ id, kind, subjectType, subjectId, treeId }) => ({ id, kind, subjectType, subjectId, treeId }) as OpenNotice)
}

async function restingNotices(now: number): Promise<(NoticeKey & { closedAt: number })[]> {
  const rows = await Notice.findAll({ where: { closedAt: { [Op.gt]: now - REOPEN_DWELL_MS, [Op.lte]: now } } })
  return rows.map(
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion -- only this program writes kinds and subjects
    ({ kind, subjectType, subjectId, closedAt }) => ({ kind, subjectType, subjectId, closedAt }) as NoticeKey & { closedAt: number },
  )
}

/** The floor was read before the transaction began: a coat that was covered since is not called dry. */
async function stillTrue(drafts: readonly NoticeDraft[]): Promise<NoticeDraft[]> {
  const treeIds = drafts.flatMap(({ subjectType, treeId }) => (subjectType === 'coat' && treeId !== null ? [treeId] : []))
  if (treeIds.length === 0) return [...drafts]
  const coats = await Coat.findAll({
    attributes: ['id', 'treeId', 'number'],
    where: { treeId: treeIds, withdrawnAt: null },
    order: [['number', 'ASC']],
  })
  const newest = new Map(coats.map((coat) => [coat.treeId, coat.id]))
  return drafts.filter(
    ({ subjectType, treeId, subjectId }) => subjectType !== 'coat' || treeId === null || newest.get(treeId) === subjectId,
  )
}

async function closeNotice({ id, reason }: NoticeClose, now: number): Promise<void> {
  await Notice.update({ closedAt: now, closeReason: reason }, { where: { id, closedAt: null } })
  // What has ended is never told late.
  await Delivery.update({ status: 'expired', lastError: reason }, { where: { noticeId: id, status: 'waiting' } })
}

async function tellSummaries(
  late: readonly NoticeDraft[],
  { vapidPublicKey, clock }: { vapidPublicKey: string; clock: Clock },
): Promise<number> {
  if (late.length === 0) return 0
  const treeIds = late.flatMap(({ treeId }) => (treeId === null ? [] : [treeId]))
  const { everyTree, watching } = await pushAudiences(treeIds, vapidPublicKey)
  const tell = (
    subject: Pick<NoticeDraft, 'subjectType' | 'subjectId'>,
    drafts: readonly NoticeDraft[],
    recipients: readonly Recipient[],
  ) =>
    openNotice({
      draft: {
        kind: 'summary',
        ...subject,
        treeId: null,
        audience: { to: 'trees', treeIds: [] },
        trueSince: clock.now(),
        ...summaryText(drafts),
        ...NOTICE_CLASS.summary,
      },
      vapidPublicKey,
      clock,
      recipients,
      isMomentary: true,
    })
  let deliveries = everyTree.length > 0 ? await tell({ subjectType: 'floor', subjectId: 'floor' }, late, everyTree) : 0
  for (const memberId of new Set(watching.map((device) => device.memberId))) {
    const mine = watching.filter((device) => device.memberId === memberId)
    const trees = new Set(mine.map(({ treeId }) => treeId))
    const drafts = late.filter(({ treeId }) => treeId !== null && trees.has(treeId))
    if (drafts.length === 0) continue
    const devices = new Map(mine.map(({ subscriptionId }) => [subscriptionId, { subscriptionId, memberId }]))
    deliveries += await tell({ subjectType: 'member', subjectId: memberId }, drafts, [...devices.values()])
  }
  return deliveries
}
