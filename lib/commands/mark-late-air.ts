import { QueryTypes } from 'sequelize'
import { LONGEST_WINDOW_MS } from '@/lib/trees/assess'
import { Coat, database } from '@/models'

/**
 * Marks covered coats whose dose readings have changed that came afterwards: each is kept as it was told, and not learned from. Costs by the
 * coats covered around the changed hours. Takes part in the caller's transaction.
 *
 * @param changed the stretch of time whose dose is another one now.
 */
export async function markLateAir(sensorId: number, changed: { from: number; to: number }, now: number): Promise<void> {
  const touched = await database.query<{ id: string }>(
    // A place's sensor at an instant: that of the first former air that ended after it, else the one it has.
    `SELECT DISTINCT c.id FROM coats c INDEXED BY coats_covered JOIN tree_places s ON s.tree_id = c.tree_id AND s.withdrawn_at IS NULL
      WHERE c.covered_at > :from AND c.covered_at < :longest AND c.dipped_at < :to AND c.withdrawn_at IS NULL AND c.air_changed_at IS NULL
        AND s.since < min(:to, c.covered_at)
        AND NOT EXISTS (SELECT 1 FROM tree_places n WHERE n.tree_id = s.tree_id AND n.withdrawn_at IS NULL
                          AND n.since > s.since AND n.since <= max(:from, c.dipped_at))
        AND coalesce(
              (SELECT f.sensor_id FROM former_airs f WHERE f.place_id = s.place_id AND f.until > max(:from, c.dipped_at, s.since)
                ORDER BY f.until LIMIT 1),
              (SELECT p.sensor_id FROM places p WHERE p.id = s.place_id)) = :sensorId`,
    { type: QueryTypes.SELECT, replacements: { sensorId, ...changed, longest: changed.to + LONGEST_WINDOW_MS } },
  )
  if (touched.length > 0) await Coat.update({ airChangedAt: now }, { where: { id: touched.map(({ id }) => id) } })
}
