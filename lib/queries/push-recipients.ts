import { QueryTypes } from 'sequelize'
import type { Audience } from '@/lib/notices/notice'
import { database } from '@/models'

export type Recipient = { subscriptionId: string; memberId: string }

// Devices that subscribed with another server key would be refused by their push service.
const DEVICES = `SELECT s.id AS subscriptionId, s.member_id AS memberId
  FROM push_subscriptions s JOIN members m ON m.id = s.member_id
 WHERE m.disabled_at IS NULL AND s.vapid_public_key = :vapidPublicKey`

const WHO: Record<Audience['to'], string> = {
  trees: `AND (s.scope = 'every tree' OR s.member_id IN (SELECT member_id FROM tree_watches WHERE tree_id IN (:treeIds)))`,
  // A delivery that was tried without a clear answer may have arrived.
  'told by': `AND s.id IN (SELECT subscription_id FROM deliveries WHERE notice_id = :noticeId
                AND (status IN ('sent', 'sending') OR (status = 'waiting' AND attempts > 0)))`,
  supervisors: `AND m.role IN ('supervisor', 'owner')`,
}

/** The devices that hear of a notice. */
export async function pushRecipients(audience: Audience, vapidPublicKey: string): Promise<Recipient[]> {
  return database.query<Recipient>(`${DEVICES} ${WHO[audience.to]} ORDER BY s.created_at`, {
    type: QueryTypes.SELECT,
    replacements: { vapidPublicKey, treeIds: [''], ...audience },
  })
}

export type WatchingDevice = Recipient & { treeId: string }

/** Devices for everything, and the devices for watched trees with each of some trees that their member watches. */
export async function pushAudiences(
  treeIds: readonly string[],
  vapidPublicKey: string,
): Promise<{ everyTree: Recipient[]; watching: WatchingDevice[] }> {
  const [everyTree, watching] = await Promise.all([
    database.query<Recipient>(`${DEVICES} AND s.scope = 'every tree'`, { type: QueryTypes.SELECT, replacements: { vapidPublicKey } }),
    database.query<WatchingDevice>(
      `SELECT d.*, w.tree_id AS treeId FROM (${DEVICES} AND s.scope = 'watched trees') d
         JOIN tree_watches w ON w.member_id = d.memberId AND w.tree_id IN (SELECT value FROM json_each(:treeIds))`,
      { type: QueryTypes.SELECT, replacements: { vapidPublicKey, treeIds: JSON.stringify(treeIds) } },
    ),
  ])
  return { everyTree, watching }
}
