import type { Clock } from '@/lib/core/clock'
import { newId } from '@/lib/core/ids'
import type { NoticeDraft } from '@/lib/notices/notice'
import { pushRecipients, type Recipient } from '@/lib/queries/push-recipients'
import { Delivery, inTransaction, Notice, TreeEvent } from '@/models'

export type OpenNoticeInput = {
  draft: NoticeDraft
  /** The server's key: only devices that subscribed with it can be reached. */
  vapidPublicKey: string
  clock: Clock
  /** Devices to tell instead of the draft's own audience; none for a notice that a summary tells. */
  recipients?: readonly Recipient[]
  /** Closed at once, for what has happened and cannot end: a deviation, a summary. */
  isMomentary?: boolean
}

/**
 * Opens a notice with its deliveries in one transaction (the caller's, where there is one), so that neither is ever without the other.
 *
 * @returns how many devices will hear of it.
 */
export function openNotice({ draft, vapidPublicKey, clock, recipients, isMomentary = false }: OpenNoticeInput): Promise<number> {
  return inTransaction(async () => {
    const now = clock.now()
    const { kind, subjectType, subjectId, treeId, title, body, urgency, ttlSeconds } = draft
    const lastEpisode = await Notice.max<number | null, Notice>('episode', { where: { kind, subjectType, subjectId } })
    const id = newId(now)
    await Notice.create({
      id,
      kind,
      subjectType,
      subjectId,
      episode: (lastEpisode ?? 0) + 1,
      treeId,
      title,
      body,
      urgency,
      ttlSeconds,
      openedAt: now,
      ...(isMomentary && { closedAt: now, closeReason: 'told' }),
    })
    if (treeId !== null) {
      await TreeEvent.create({ treeId, kind: 'notice', memberId: null, at: now, detail: { text: `${title}. ${body}`, notice: kind } })
    }
    const devices = recipients ?? (await pushRecipients(draft.audience, vapidPublicKey))
    await Delivery.bulkCreate(
      devices.map(({ subscriptionId, memberId }) => ({
        id: newId(now),
        noticeId: id,
        subscriptionId,
        memberId,
        status: 'waiting' as const,
        nextAttemptAt: now,
        expiresAt: now + ttlSeconds * 1000,
      })),
    )
    return devices.length
  })
}
