import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { pushTag } from '@/lib/notices/notice'
import type { PushMessage } from '@/lib/notices/push-contract'
import { database, Delivery, inTransaction } from '@/models'

/** Longer than any send may take; a sender that died is forgotten after it. */
const LEASE_MS = 60_000

export type ClaimedDelivery = {
  id: string
  subscriptionId: string
  endpoint: string
  p256dh: string
  auth: string
  urgency: 'normal' | 'high'
  /** Attempts with this one: the claim's number, so that a sender which lost its lease records nothing. */
  attempts: number
  claimedAt: number
  expiresAt: number
  message: PushMessage
}

type Row = Omit<ClaimedDelivery, 'message' | 'claimedAt' | 'endpoint'> & {
  endpoint: string | null
  kind: string
  subjectType: string
  subjectId: string
  treeId: string | null
  title: string
  body: string
  openedAt: number
  tag: string | null
}

/**
 * Takes up to `limit` deliveries that are due, or whose sender died, under a lease. High urgency goes first.
 * Those past their time are closed as expired, those whose device or member is gone as gone.
 */
export function claimDeliveries({ clock, limit }: { clock: Clock; limit: number }): Promise<ClaimedDelivery[]> {
  return inTransaction(async () => {
    const now = clock.now()
    await database.query(
      `UPDATE deliveries SET status = 'expired', last_error = COALESCE(last_error, 'Not sent in time')
        WHERE status IN ('waiting', 'sending') AND expires_at <= :now AND COALESCE(lease_until, 0) <= :now`,
      { replacements: { now } },
    )
    const rows = await database.query<Row>(
      `SELECT d.id, d.subscription_id AS subscriptionId, d.attempts + 1 AS attempts, d.expires_at AS expiresAt,
              s.endpoint, s.p256dh, s.auth, n.urgency, n.kind, n.subject_type AS subjectType, n.subject_id AS subjectId,
              n.tree_id AS treeId, n.title, n.body, n.opened_at AS openedAt, t.tag
         FROM deliveries d
         JOIN notices n ON n.id = d.notice_id
         JOIN members m ON m.id = d.member_id
         LEFT JOIN push_subscriptions s ON s.id = d.subscription_id AND s.member_id = d.member_id AND m.disabled_at IS NULL
         LEFT JOIN trees t ON t.id = n.tree_id
        -- The first line finds the index of what is still due: all that was ever sent lies in the same table.
        WHERE d.status IN ('waiting', 'sending')
          AND ((d.status = 'waiting' AND d.next_attempt_at <= :now) OR (d.status = 'sending' AND d.lease_until <= :now))
        ORDER BY n.urgency, n.opened_at, d.id LIMIT :limit`,
      { type: QueryTypes.SELECT, replacements: { now, limit } },
    )
    const claimed = rows.flatMap((row) => (row.endpoint === null ? [] : [claim(row, row.endpoint, now)]))
    const claimedIds = new Set(claimed.map(({ id }) => id))
    const orphans = rows.filter(({ id }) => !claimedIds.has(id)).map(({ id }) => id)
    await Delivery.update({ status: 'gone', leaseUntil: null }, { where: { id: orphans } })
    await Delivery.increment('attempts', { where: { id: [...claimedIds] } })
    await Delivery.update({ status: 'sending', leaseUntil: now + LEASE_MS }, { where: { id: [...claimedIds] } })
    return claimed
  })
}

function claim(row: Row, endpoint: string, now: number): ClaimedDelivery {
  const { id, subscriptionId, p256dh, auth, urgency, attempts, expiresAt, title, body, openedAt, tag } = row
  const message = { title, body, tag: pushTag(row), path: tag === null ? '/' : `/trees/${tag}`, at: openedAt }
  return { id, subscriptionId, endpoint, p256dh, auth, urgency, attempts, claimedAt: now, expiresAt, message }
}
