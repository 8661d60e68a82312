import { QueryTypes } from 'sequelize'
import type { RecessClass } from '@/lib/coats/vocabulary'
import { RECESS_FACTOR } from '@/lib/drying/need'
import { database } from '@/models'

/** How much slower each class of recess is taken to dry: what somebody accepted last, else the starting value. */
export async function loadRecessFactors(): Promise<Record<RecessClass, number>> {
  const accepted = await database.query<{ recessClass: RecessClass; factor: number }>(
    // SQLite takes the other columns from the row of the maximum.
    `SELECT recess_class AS recessClass, figure_after AS factor, max(rowid) FROM calibrations INDEXED BY calibrations_recess
      WHERE recess_class IS NOT NULL GROUP BY recess_class`,
    { type: QueryTypes.SELECT },
  )
  return { ...RECESS_FACTOR, ...Object.fromEntries(accepted.map(({ recessClass, factor }) => [recessClass, factor])) }
}
