import { readRow, type RowContext } from '@/lib/uploads/read-row'
import type { RowOrder } from '@/lib/uploads/upload-settings'

/**
 * Which way the rows of a file run, by rows from all over it: more steps forward than back, or the other way round.
 *
 * @param rows in the order of the file.
 */
export function rowOrder(rows: readonly (readonly string[])[], context: Omit<RowContext, 'order' | 'lastAt'>): RowOrder {
  const instants = rows.flatMap((cells) => readRow(cells, { ...context, order: 'oldest first', lastAt: null }).row?.measuredAt ?? [])
  let forward = 0
  for (const [index, at] of instants.entries()) if (index > 0) forward += Math.sign(at - (instants[index - 1] ?? at))
  return forward < 0 ? 'newest first' : 'oldest first'
}
