import { QueryTypes } from 'sequelize'
import type { CalibrationRow } from '@/lib/calibration/going-back'
import { database } from '@/models'

/** So many of the newest acceptances are shown, and can be gone back on. */
const MOST_ROWS = 100

export type CalibrationLine = CalibrationRow & { by: string; at: number; recipeName: string | null; placeName: string | null }

/** What people took over from finished coats, newest first. */
export function loadCalibrationRows(): Promise<CalibrationLine[]> {
  return database.query<CalibrationLine>(
    `SELECT c.id, c.scope, c.recipe_id AS recipeId, c.coat_number AS coatNumber, c.place_id AS placeId, c.recess_class AS recessClass,
            c.figure_before AS figureBefore, c.figure_after AS figureAfter, c.spread_before AS spreadBefore, c.spread_after AS spreadAfter,
            c.coats_before AS coatsBefore, c.coats_after AS coatsAfter, c.goes_back_on AS goesBackOn, m.name AS "by", c.at,
            r.name AS recipeName, p.name AS placeName
       FROM calibrations c JOIN members m ON m.id = c.member_id LEFT JOIN recipes r ON r.id = c.recipe_id LEFT JOIN places p ON p.id = c.place_id
      ORDER BY c.at DESC, c.rowid DESC LIMIT :most`,
    { type: QueryTypes.SELECT, replacements: { most: MOST_ROWS } },
  )
}
