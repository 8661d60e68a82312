import { tzOffset } from '@date-fns/tz'
import { millisecondsInDay, millisecondsInMinute } from 'date-fns/constants'
import type { RowOrder } from '@/lib/uploads/upload-settings'

/** Offsets a day before and after each local day that was asked for: equal on all but the two days of a clock change. */
const offsets = new Map<string, readonly [before: number, after: number]>()
const OFFSETS_KEPT = 2000

function offsetsAround(wallMs: number, timeZone: string): readonly [number, number] {
  const day = Math.floor(wallMs / millisecondsInDay)
  const key = `${day} ${timeZone}`
  const known = offsets.get(key)
  if (known) return known
  if (offsets.size >= OFFSETS_KEPT) offsets.clear()
  const offsetAt = (at: number) => tzOffset(timeZone, new Date(at)) * millisecondsInMinute
  const made = [offsetAt((day - 1) * millisecondsInDay), offsetAt((day + 2) * millisecondsInDay)] as const
  offsets.set(key, made)
  return made
}

/**
 * The instants that a wall clock of a zone can mean: one; two in the hour that is lived twice, the earlier first; none in the hour
 * that is skipped.
 *
 * @param wallMs date and clock, as if they were UTC.
 */
export function instantsOf(wallMs: number, timeZone: string): number[] {
  const [before, after] = offsetsAround(wallMs, timeZone)
  if (before === after) return [wallMs - before]
  return [before, after]
    .map((offset) => ({ at: wallMs - offset, offset }))
    .filter(({ at, offset }) => tzOffset(timeZone, new Date(at)) * millisecondsInMinute === offset)
    .map(({ at }) => at)
    .toSorted((one, other) => one - other)
}

/**
 * Which of two instants of the repeated hour a row means, by the order of the rows: the first that does not go back behind the row before it.
 *
 * @param instants from `instantsOf`, at least one.
 * @param lastAt instant of the row before; null for the first one.
 */
export function inOrder(instants: readonly number[], lastAt: number | null, order: RowOrder): number {
  const [earlier = Number.NaN, later = earlier] = instants
  if (order === 'oldest first') return lastAt === null || earlier >= lastAt ? earlier : later
  return lastAt === null || later <= lastAt ? later : earlier
}
