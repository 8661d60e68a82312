import { millisecondsInDay, millisecondsInMinute } from 'date-fns/constants'
import { readingRow, type ReadingBatchAnswer, type ReadingRow } from '@/lib/room/reading-contract'

export const FUTURE_LIMIT_MS = 2 * millisecondsInMinute
/** Older rows come as a file: the live door is for what a logger kept while the network was away. */
export const PAST_LIMIT_MS = 31 * millisecondsInDay

/**
 * Sorts the rows of a batch into good ones and refused ones, each refused one with its index and a sentence.
 *
 * Shape: unchecked rows in; instants of good rows in epoch milliseconds. `now` in epoch milliseconds.
 */
export function checkRows(rows: readonly unknown[], now: number): { rows: ReadingRow[]; rejected: ReadingBatchAnswer['rejected'] } {
  const good: ReadingRow[] = []
  const rejected: ReadingBatchAnswer['rejected'] = []
  for (const [index, row] of rows.entries()) {
    const parsed = readingRow.safeParse(row)
    if (!parsed.success) {
      const reason = parsed.error.issues.map((issue) => [issue.path.join('.'), issue.message].filter(Boolean).join(': ')).join(' ')
      rejected.push({ index, reason })
    } else if (parsed.data.measuredAt > now + FUTURE_LIMIT_MS) {
      rejected.push({ index, reason: 'measuredAt lies more than 2 min ahead: check the clock of the sensor.' })
    } else if (parsed.data.measuredAt < now - PAST_LIMIT_MS) {
      rejected.push({ index, reason: 'measuredAt lies more than 31 days back.' })
    } else {
      good.push(parsed.data)
    }
  }
  return { rows: good, rejected }
}
