import { TZDate } from '@date-fns/tz'
import { formatDay } from '@/lib/format/local-time'
import type { QueueTree } from '@/lib/queue/contract'

/** 'tight': half of such shells make it, not nine of ten. 'passed': the day is over and the tree still hangs here. */
export const POUR_VERDICTS = ['holds', 'tight', 'will miss', 'passed', 'not in sight'] as const
export type PourVerdict = (typeof POUR_VERDICTS)[number]

/**
 * When a shell must be dried out for its pour: local midnight at which the pour day begins, so that burnout and the
 * pour itself have the day. The foundry's own rule of thumb, no source; once kiln loads are planned, their door hour rules.
 *
 * @throws {RangeError} if the day is not a calendar day.
 */
export function pourDeadlineAt(pourDate: string, timeZone: string): number {
  const [year = Number.NaN, month = Number.NaN, day = Number.NaN] = pourDate.split('-').map(Number)
  const at = new TZDate(year, month - 1, day, 0, 0, 0, timeZone).getTime()
  if (Number.isNaN(at)) throw new RangeError(`Not a day: ${pourDate}`)
  return at
}

type PourTree = Pick<QueueTree, 'pourDate' | 'willMissPour' | 'driedOut' | 'state'>

/** Whether the whole shell is dried out in time for its pour; null without a pour date or once it has left the room. */
export function pourVerdict(tree: PourTree, now: number, timeZone: string): PourVerdict | null {
  if (tree.pourDate === null || tree.state === 'released' || tree.state === 'scrapped') return null
  const deadline = pourDeadlineAt(tree.pourDate, timeZone)
  const dayAfter = pourDeadlineAt(nextDay(tree.pourDate), timeZone)
  if (now >= dayAfter) return 'passed'
  if (tree.willMissPour) return 'will miss'
  if (tree.state === 'dried out' || tree.state === 'ready for burnout') return 'holds'
  if (tree.driedOut?.likelyAt == null) return 'not in sight'
  if (tree.driedOut.likelyAt > deadline) return 'will miss'
  return tree.driedOut.safeAt !== null && tree.driedOut.safeAt <= deadline ? 'holds' : 'tight'
}

function nextDay(day: string): string {
  return new Date(Date.parse(`${day}T00:00:00Z`) + 86_400_000).toISOString().slice(0, 10)
}

/** The verdict as half a sentence that follows the dried-out pair. */
export function pourSentence(verdict: PourVerdict, pourDate: string): string {
  const day = formatDay(pourDate)
  switch (verdict) {
    case 'holds':
      return `holds its pour, ${day}`
    case 'tight':
      return `tight for its pour, ${day}: nothing may slip`
    case 'will miss':
      return `will miss its pour, ${day}: move the pour or the tree goes without`
    case 'passed':
      return `its pour date, ${day}, has passed: set a new one`
    case 'not in sight':
      return `pour ${day}: not in sight yet whether it holds`
  }
}
