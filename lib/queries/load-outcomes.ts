import { millisecondsInDay } from 'date-fns/constants'
import { QueryTypes } from 'sequelize'
import { z } from 'zod'
import type { ClockNow, Outcome, RecipeCoatNow } from '@/lib/calibration/types'
import type { CoatingWay, CoatKind, RecessClass, Stucco } from '@/lib/coats/vocabulary'
import type { FoundryFacts } from '@/lib/queries/load-foundry'
import { airOf } from '@/lib/trees/spans'
import { database, Sensor } from '@/models'

/** What is learned from: so many of the newest coats, of so much time. */
export const MOST_OUTCOMES = 500
export const OUTCOME_DAYS = 730

type Row = Pick<
  Outcome,
  | 'coatId'
  | 'tag'
  | 'recipeId'
  | 'number'
  | 'moistureTarget'
  | 'placeId'
  | 'dippedAt'
  | 'coveredAt'
  | 'roughMinutes'
  | 'moistureRatioBelow'
  | 'theta'
  | 'sd'
  | 'dryAt'
  | 'gapShare'
> & {
  kind: CoatKind
  stucco: Stucco
  way: CoatingWay
  recessClass: RecessClass
  drainSeconds: number
  deviations: string
  memberId: string
  memberName: string
  earliestAt: number | null
  likelyAt: number | null
  safeAt: number | null
  recipeReferenceHours: number | null
  recessFactor: number
  airChangedAt: number | null
  hasMoved: number
}

const deviationList = z.array(z.string())
const OTHER_WORK = ['other bath', 'other stucco', 'not in the recipe']

/**
 * The newest covered coats with evidence, newest first: bounded by number and time, and read along an index of such coats alone. Where the
 * foundry is a real one, coats of demo trees are left out: they would teach it another shop's air.
 */
export async function loadOutcomes({ places }: FoundryFacts, now: number): Promise<Outcome[]> {
  const [rows, sensors] = await Promise.all([
    database.query<Row>(
      `SELECT c.id AS coatId, t.tag, v.recipe_id AS recipeId, c.number, c.kind, c.stucco, c.way, c.moisture_target AS moistureTarget,
              t.recess_class AS recessClass, c.place_id AS placeId, c.dipped_at AS dippedAt, c.drain_seconds AS drainSeconds,
              c.covered_at AS coveredAt, c.rough_minutes AS roughMinutes, c.deviations, c.moisture_ratio_below AS moistureRatioBelow,
              m.id AS memberId, m.name AS memberName, c.outcome_theta AS theta, c.outcome_sd AS sd, c.outcome_dry_at AS dryAt,
              c.outcome_gap_share AS gapShare, c.forecast_p10_at AS earliestAt, c.forecast_p50_at AS likelyAt, c.forecast_p90_at AS safeAt,
              c.recipe_reference_hours AS recipeReferenceHours, c.recess_factor AS recessFactor, c.air_changed_at AS airChangedAt,
              EXISTS (SELECT 1 FROM tree_places p WHERE p.tree_id = c.tree_id AND p.withdrawn_at IS NULL
                        AND p.since > c.dipped_at AND p.since < c.covered_at) AS hasMoved
         FROM coats c INDEXED BY coats_outcome JOIN trees t ON t.id = c.tree_id JOIN recipe_versions v ON v.id = t.recipe_version_id
         JOIN members m ON m.id = c.logged_by
        WHERE c.outcome_theta IS NOT NULL AND c.withdrawn_at IS NULL AND c.covered_at > :from
          AND (t.is_demo = 0 OR (SELECT is_demo FROM foundry) = 1)
        ORDER BY c.covered_at DESC LIMIT :most`,
      { type: QueryTypes.SELECT, replacements: { from: now - OUTCOME_DAYS * millisecondsInDay, most: MOST_OUTCOMES } },
    ),
    Sensor.findAll({ attributes: ['id', 'kind'] }),
  ])
  const placeOf = new Map(places.map((place) => [place.id, place]))
  const kindOf = new Map(sensors.map(({ id, kind }) => [id, kind]))
  return rows.flatMap((row): Outcome[] => {
    const place = placeOf.get(row.placeId)
    if (!place) return []
    const [air, atCover] = [airOf(place, row.dippedAt), airOf(place, row.coveredAt)]
    const { earliestAt, likelyAt, safeAt } = row
    const deviations = deviationList.parse(JSON.parse(row.deviations))
    return [
      {
        coatId: row.coatId,
        tag: row.tag,
        recipeId: row.recipeId,
        number: row.number,
        kind: row.kind,
        stucco: row.stucco,
        way: row.way,
        moistureTarget: row.moistureTarget,
        recessClass: row.recessClass,
        placeId: row.placeId,
        dippedAt: row.dippedAt,
        startedAt: row.dippedAt + row.drainSeconds * 1000,
        coveredAt: row.coveredAt,
        roughMinutes: row.roughMinutes,
        isOtherWork: deviations.some((deviation) => OTHER_WORK.includes(deviation)),
        moistureRatioBelow: row.moistureRatioBelow,
        dippedBy: { id: row.memberId, name: row.memberName },
        theta: row.theta,
        sd: row.sd,
        dryAt: row.dryAt,
        gapShare: row.gapShare,
        forecast: earliestAt === null || likelyAt === null || safeAt === null ? null : { earliestAt, likelyAt, safeAt },
        atDip: {
          recipeReferenceHours: row.recipeReferenceHours,
          recessFactor: row.recessFactor,
          airFactor: air.airFactor ?? 1,
        },
        hasMoved: row.hasMoved === 1,
        isTypedOnly: kindOf.get(air.sensorId) === 'wall hygrometer',
        hasChangedAir: row.airChangedAt !== null || (air.airFactor ?? 1) !== (atCover.airFactor ?? 1),
        isAirAsNow:
          air.sensorId === place.sensorId &&
          air.airSpeedFansOnMps === place.airSpeedFansOnMps &&
          air.airSpeedFansOffMps === place.airSpeedFansOffMps &&
          air.fanDuty === place.fanDuty,
      },
    ]
  })
}

/** A covered coat of which nobody took anything that tells. */
export type UnheardCoat = { tag: string; number: number; coveredAt: number }

/** Of as many of the newest covered coats, those without evidence, newest first. */
export async function loadUnheardCoats(now: number): Promise<UnheardCoat[]> {
  return database.query<UnheardCoat>(
    `SELECT tag, number, coveredAt FROM (
       SELECT t.tag, c.number, c.covered_at AS coveredAt, c.outcome_theta AS theta FROM coats c INDEXED BY coats_covered JOIN trees t ON t.id = c.tree_id
        WHERE c.covered_at > :from AND c.withdrawn_at IS NULL AND (t.is_demo = 0 OR (SELECT is_demo FROM foundry) = 1)
        ORDER BY c.covered_at DESC LIMIT :most)
      WHERE theta IS NULL`,
    { type: QueryTypes.SELECT, replacements: { from: now - OUTCOME_DAYS * millisecondsInDay, most: MOST_OUTCOMES } },
  )
}

/** A recipe in use or retired, as far as its calibration asks about it. */
export type RecipeNow = { id: string; name: string; isRetired: boolean; versionId: string; version: number }

/** The figures of the clock as they stand: needs of the newest versions, and the factors of places and recesses. */
export async function loadClockNow({ places, recessFactors }: FoundryFacts): Promise<{ now: ClockNow; recipes: RecipeNow[] }> {
  const rows = await database.query<RecipeCoatNow & { name: string; isRetired: number; versionId: string; version: number }>(
    `SELECT r.id AS recipeId, r.name, r.retired_at IS NOT NULL AS isRetired, v.id AS versionId, v.version, c.number, c.kind, c.stucco,
            c.moisture_target AS moistureTarget, c.need_reference_hours AS needReferenceHours, c.need_spread AS needSpread,
            c.calibrated_by_coats AS calibratedByCoats
       FROM recipes r JOIN recipe_versions v ON v.recipe_id = r.id JOIN recipe_coats c ON c.recipe_version_id = v.id
      WHERE v.version = (SELECT max(w.version) FROM recipe_versions w WHERE w.recipe_id = r.id) ORDER BY r.name, c.number`,
    { type: QueryTypes.SELECT },
  )
  const recipes = new Map(
    rows.map(({ recipeId, name, isRetired, versionId, version }) => [
      recipeId,
      { id: recipeId, name, isRetired: isRetired === 1, versionId, version },
    ]),
  )
  return {
    now: {
      recipeCoats: rows.map(({ recipeId, number, kind, stucco, moistureTarget, needReferenceHours, needSpread, calibratedByCoats }) => ({
        recipeId,
        number,
        kind,
        stucco,
        moistureTarget,
        needReferenceHours,
        needSpread,
        calibratedByCoats,
      })),
      airFactors: new Map(places.map(({ id, airFactor }) => [id, airFactor ?? 1])),
      recessFactors,
    },
    recipes: [...recipes.values()],
  }
}
