import { millisecondsInDay, millisecondsInMinute, millisecondsInSecond } from 'date-fns/constants'
import { readingRow, type ReadingBatchAnswer, type ReadingRow } from '@/lib/room/reading-contract'

export const FUTURE_LIMIT_MS = 2 * millisecondsInMinute
/** Older rows come as a file: the live door is for what a logger kept while the network was away. */
export const PAST_LIMIT_MS = 31 * millisecondsInDay

export type CheckedRows = {
  rows: ReadingRow[]
  /** Where each of `rows` stood in the batch. */
  indexes: number[]
  rejected: ReadingBatchAnswer['rejected']
  /** The newest moment that any row names, refused or not; null where none names one. */
  newestAt: number | null
}

/**
 * Sorts the rows of a batch into readings and what is none, each of those with its index and a sentence.
 *
 * Shape: unchecked rows in; instants of good rows in epoch milliseconds. `now` in epoch milliseconds.
 */
export function checkRows(rows: readonly unknown[], now: number): CheckedRows {
  const checked: CheckedRows = { rows: [], indexes: [], rejected: [], newestAt: null }
  for (const [index, row] of rows.entries()) {
    const parsed = readingRow.safeParse(row)
    if (!parsed.success) {
      const reason = parsed.error.issues.map((issue) => [issue.path.join('.'), issue.message].filter(Boolean).join(': ')).join(' ')
      checked.rejected.push({ index, reason })
      continue
    }
    const { measuredAt } = parsed.data
    checked.newestAt = Math.max(checked.newestAt ?? 0, measuredAt)
    if (measuredAt > now + FUTURE_LIMIT_MS) {
      checked.rejected.push({ index, reason: 'measuredAt lies more than 2 min ahead: check the clock of the sensor.' })
    } else if (measuredAt < now - PAST_LIMIT_MS) {
      checked.rejected.push({ index, reason: 'measuredAt lies more than 31 days back.' })
    } else {
      checked.rows.push(parsed.data)
      checked.indexes.push(index)
    }
  }
  return checked
}

/**
 * How far the clock of a sender is ahead of ours, whole seconds; negative behind; null within two minutes. Undefined where the batch does
 * not tell: without `sentAt` old rows may come from a slow clock or from a logger that was away.
 *
 * @example senderClock({ sentAt: 1_420_000, newestAt: null, now: 1_000_000 }) // => 420
 */
export function senderClock({
  sentAt,
  newestAt,
  now,
}: {
  sentAt: number | undefined
  newestAt: number | null
  now: number
}): number | null | undefined {
  if (sentAt === undefined && (newestAt === null || newestAt < now - FUTURE_LIMIT_MS)) return undefined
  const aheadMs = (sentAt ?? newestAt ?? now) - now
  return Math.abs(aheadMs) > FUTURE_LIMIT_MS ? Math.round(aheadMs / millisecondsInSecond) : null
}
