import { QueryTypes } from 'sequelize'
import type { RecessClass, Spacing } from '@/lib/coats/vocabulary'
import { treeTitle, type PieceName } from '@/lib/trees/title'
import { slowestSpot } from '@/lib/trees/coat-evidence'
import type { CoatFacts, EvidenceFacts, RecipeCoatFacts, TreeFacts } from '@/lib/trees/facts'
import { wordOf } from '@/lib/trees/word'
import { database } from '@/models'

/** Which trees: those on the floor, or some by id. */
export type TreeSelection = { on: 'floor' } | { ids: readonly string[] }

type TreeRow = {
  id: string
  tag: string
  isDemo: number
  recessClass: RecessClass
  spacing: Spacing
  pourDate: string | null
  intakePassedAt: number | null
  releasedAt: number | null
  scrappedAt: number | null
  versionId: string
  recipeName: string
  version: number
}
type OfTree<Row> = Row & { treeId: string }

const select = <Row extends object>(sql: string, replacements: Record<string, unknown> = {}) =>
  database.query<Row>(sql, { type: QueryTypes.SELECT, replacements })

function condition(selection: TreeSelection): { where: string; replacements: Record<string, unknown> } {
  if ('on' in selection) return { where: 't.released_at IS NULL AND t.scrapped_at IS NULL', replacements: {} }
  return { where: 't.id IN (SELECT value FROM json_each(:ids))', replacements: { ids: JSON.stringify(selection.ids) } }
}

/** Stored facts of the chosen trees, by tag; a handful of queries, however many trees there are. */
export async function loadFacts(selection: TreeSelection): Promise<TreeFacts[]> {
  const { where, replacements } = condition(selection)
  const trees = await select<TreeRow>(
    `SELECT t.id, t.tag, t.is_demo AND NOT (SELECT is_demo FROM foundry) AS isDemo, t.recess_class AS recessClass, t.spacing, t.pour_date AS pourDate, t.intake_passed_at AS intakePassedAt,
            t.released_at AS releasedAt, t.scrapped_at AS scrappedAt, v.id AS versionId, v.version, r.name AS recipeName
       FROM trees t JOIN recipe_versions v ON v.id = t.recipe_version_id JOIN recipes r ON r.id = v.recipe_id
      WHERE ${where} ORDER BY t.tag`,
    replacements,
  )
  if (trees.length === 0) return []
  const ids = JSON.stringify(trees.map((tree) => tree.id))
  const [coats, stays, holds, evidence, lookOvers, pieces, recipeCoats] = await Promise.all([
    select<OfTree<CoatRow>>(
      `SELECT tree_id AS treeId, id, number, kind, stucco, way, place_id AS placeId, dipped_at AS dippedAt, drain_seconds AS drainSeconds,
              rough_minutes AS roughMinutes, need_reference_hours AS needReferenceHours, moisture_target AS moistureTarget, guard,
              longest_wait_hours AS longestWaitHours, need_spread AS needSpread, is_calibrated AS isCalibrated, recess_factor AS recessFactor, air_temp_c AS airTempC,
              covered_at AS coveredAt, moisture_ratio_at_redip AS moistureRatioAtRedip
         FROM coats WHERE withdrawn_at IS NULL AND tree_id IN (SELECT value FROM json_each(:ids)) ORDER BY tree_id, number`,
      { ids },
    ),
    select<OfTree<{ placeId: string; since: number }>>(
      `SELECT tree_id AS treeId, place_id AS placeId, since FROM tree_places
        WHERE withdrawn_at IS NULL AND tree_id IN (SELECT value FROM json_each(:ids)) ORDER BY tree_id, since, id`,
      { ids },
    ),
    select<OfTree<{ id: string; reason: string; by: string; at: number }>>(
      `SELECT h.tree_id AS treeId, h.id, h.reason, m.name AS "by", h.held_at AS at FROM holds h JOIN members m ON m.id = h.held_by
        WHERE h.lifted_at IS NULL AND h.tree_id IN (SELECT value FROM json_each(:ids))`,
      { ids },
    ),
    select<OfTree<EvidenceFacts & { coatId: string | null }>>(
      `SELECT e.tree_id AS treeId, e.coat_id AS coatId, e.id, e.kind, e.spot, e.verdict, e.moment, e.mass_kg AS massKg,
              e.surface_temp_c AS surfaceTempC, e.air_temp_c AS airTempC, e.rel_humidity_pct AS relHumidityPct, e.taken_at AS takenAt,
              m.name AS "by", e.member_id AS memberId, e.dose_reference_hours AS doseReferenceHours
         FROM evidence e JOIN members m ON m.id = e.member_id
        WHERE e.withdrawn_at IS NULL AND e.tree_id IN (SELECT value FROM json_each(:ids)) ORDER BY e.tree_id, e.taken_at, e.id`,
      { ids },
    ),
    select<{ coatId: string; at: number }>(
      `SELECT coat_id AS coatId, max(looked_over_at) AS at FROM look_overs
        WHERE was_dried_out = 1 AND tree_id IN (SELECT value FROM json_each(:ids)) GROUP BY coat_id`,
      { ids },
    ),
    select<OfTree<PieceName>>(
      `SELECT tp.tree_id AS treeId, w.title AS workTitle, s.name AS sectionName, p.edition_number AS editionNumber
         FROM tree_pieces tp JOIN pieces p ON p.id = tp.piece_id JOIN sections s ON s.id = p.section_id JOIN works w ON w.id = s.work_id
        WHERE tp.tree_id IN (SELECT value FROM json_each(:ids)) ORDER BY w.title, s.name, p.edition_number`,
      { ids },
    ),
    select<RecipeCoatRow>(
      `SELECT c.recipe_version_id AS versionId, c.number, c.kind, c.bath_id AS bathId, b.name AS bathName, c.stucco,
              c.need_reference_hours AS needReferenceHours, c.moisture_target AS moistureTarget, c.guard, c.drain_seconds AS drainSeconds,
              c.longest_wait_hours AS longestWaitHours, c.is_prewet AS isPrewet, c.read_aloud AS readAloud, c.need_spread AS needSpread,
              c.calibrated_by_coats IS NOT NULL OR v.calibrated_at IS NOT NULL AS isCalibrated
         FROM recipe_coats c JOIN baths b ON b.id = c.bath_id JOIN recipe_versions v ON v.id = c.recipe_version_id
        WHERE c.recipe_version_id IN (SELECT value FROM json_each(:versions)) ORDER BY c.recipe_version_id, c.number`,
      { versions: JSON.stringify([...new Set(trees.map((tree) => tree.versionId))]) },
    ),
  ])
  const coatsOf = groupBy(coats, (row) => row.treeId)
  const staysOf = groupBy(stays, (row) => row.treeId)
  const piecesOf = groupBy(pieces, (row) => row.treeId)
  const recipeOf = groupBy(recipeCoats, (row) => row.versionId)
  const holdOf = new Map(holds.map(({ treeId, ...hold }) => [treeId, hold]))
  const evidenceOf = groupBy(evidence, (row) => row.treeId)
  const lookedOverOf = new Map(lookOvers.map((row) => [row.coatId, row.at]))
  return trees.map((tree): TreeFacts => {
    const seen = evidenceOf.get(tree.id) ?? []
    const seenOn = (coatId: string | null) => seen.filter((row) => row.coatId === coatId).map(plain)
    const own = (coatsOf.get(tree.id) ?? []).map(({ treeId: _treeId, isCalibrated, ...row }): CoatFacts => ({
      ...row,
      isCalibrated: isCalibrated === 1,
      evidence: seenOn(row.id),
    }))
    const newest = own.at(-1)
    return {
      id: tree.id,
      tag: tree.tag,
      title: treeTitle(piecesOf.get(tree.id) ?? []),
      isDemo: tree.isDemo === 1,
      recessClass: tree.recessClass,
      spacing: tree.spacing,
      pourDate: tree.pourDate,
      intakePassedAt: tree.intakePassedAt,
      releasedAt: tree.releasedAt,
      scrappedAt: tree.scrappedAt,
      recipe: {
        versionId: tree.versionId,
        name: tree.recipeName,
        version: tree.version,
        coats: (recipeOf.get(tree.versionId) ?? []).map((row) => ({
          ...row,
          isPrewet: row.isPrewet === 1,
          isCalibrated: row.isCalibrated === 1,
        })),
      },
      coats: own,
      stays: staysOf.get(tree.id) ?? [],
      hold: holdOf.get(tree.id) ?? null,
      waxWeighings: seenOn(null),
      word: newest ? wordOf(newest.evidence, slowestSpot(tree.recessClass)) : null,
      lookedOverAt: lookedOverOf.get(newest?.id ?? '') ?? null,
    }
  })
}

// Map.groupBy came after Node 20.
function groupBy<Row>(rows: readonly Row[], keyOf: (row: Row) => string): Map<string, Row[]> {
  const groups = new Map<string, Row[]>()
  for (const row of rows) {
    const group = groups.get(keyOf(row))
    if (group) group.push(row)
    else groups.set(keyOf(row), [row])
  }
  return groups
}

type RecipeCoatRow = Omit<RecipeCoatFacts, 'isPrewet' | 'isCalibrated'> & { versionId: string; isPrewet: number; isCalibrated: number }

type CoatRow = Omit<CoatFacts, 'isCalibrated' | 'evidence'> & { isCalibrated: number }

const plain = ({ treeId: _treeId, coatId: _coatId, ...row }: OfTree<EvidenceFacts & { coatId: string | null }>): EvidenceFacts => row
