import { QueryTypes } from 'sequelize'
import type { VersionCoat } from '@/lib/recipes/coat-cells'
import { database } from '@/models'

/** A stored coat, with what stands behind its need. */
export type StoredCoat = VersionCoat & {
  /** Spread of ln(need). */
  needSpread: number
  /** Null: starting values. */
  calibratedByCoats: number | null
}

/** The coats of some versions of recipes, by the version's id, inner coat first. */
export async function loadVersionCoats(versionIds: readonly string[]): Promise<Map<string, StoredCoat[]>> {
  const rows = await database.query<Omit<StoredCoat, 'isPrewet'> & { versionId: string; isPrewet: number }>(
    `SELECT c.recipe_version_id AS versionId, c.number, c.kind, c.bath_id AS bathId, b.name AS bathName, c.stucco,
            c.need_reference_hours AS needReferenceHours, c.moisture_target AS moistureTarget, c.guard, c.drain_seconds AS drainSeconds,
            c.longest_wait_hours AS longestWaitHours, c.is_prewet AS isPrewet, c.read_aloud AS readAloud, c.need_spread AS needSpread, c.calibrated_by_coats AS calibratedByCoats
       FROM recipe_coats c JOIN baths b ON b.id = c.bath_id
      WHERE c.recipe_version_id IN (SELECT value FROM json_each(:ids)) ORDER BY c.recipe_version_id, c.number`,
    { type: QueryTypes.SELECT, replacements: { ids: JSON.stringify(versionIds) } },
  )
  const coats = new Map<string, StoredCoat[]>(versionIds.map((id) => [id, []]))
  for (const { versionId, ...row } of rows) coats.get(versionId)?.push({ ...row, isPrewet: row.isPrewet === 1 })
  return coats
}
