import { QueryTypes } from 'sequelize'
import { database } from '@/models'

/**
 * A number that moves with every change of the records, whoever made it.
 *
 * `data_version` on the handle that is used outside transactions moves whenever another handle or process has committed, and
 * every write of ours is a transaction, which has a handle of its own. It counts for this process only.
 */
export async function dataVersion(): Promise<number> {
  const [row] = await database.query<{ data_version: number }>('PRAGMA data_version', { type: QueryTypes.SELECT })
  return row?.data_version ?? 0
}
