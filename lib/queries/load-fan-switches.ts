import { QueryTypes } from 'sequelize'
import type { FanSwitch } from '@/lib/drying/types'
import { database } from '@/models'

/** What people said of the fans of each place, by place id, in the order of time; `by` is a name. */
export type FanSwitches = ReadonlyMap<string, readonly (FanSwitch & { by: string })[]>

/** Switches since an instant, with the last one before it, which may stand still; along the index, whatever lies before. */
export async function loadFanSwitches(from: number): Promise<FanSwitches> {
  const rows = await database.query<FanSwitch & { placeId: string; by: string }>(
    `SELECT s.place_id AS placeId, s.at, s.state, m.name AS "by"
       FROM places p CROSS JOIN fan_switches s ON s.place_id = p.id
        AND s.at >= coalesce((SELECT max(l.at) FROM fan_switches l WHERE l.place_id = p.id AND l.at <= :from), :from)
       JOIN members m ON m.id = s.member_id
      ORDER BY s.place_id, s.at, s.id`,
    { type: QueryTypes.SELECT, replacements: { from } },
  )
  const switches = new Map<string, (FanSwitch & { by: string })[]>()
  for (const { placeId, ...row } of rows) switches.set(placeId, [...(switches.get(placeId) ?? []), row])
  return switches
}
