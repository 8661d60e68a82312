import { formatDay } from '@/lib/format/local-time'
import type { QueueTree } from '@/lib/queue/contract'
import { pourDeadline, startOfLocalDay, type WorkCalendar } from '@/lib/schedule/shifts'

/** 'tight': half of such shells make it, not nine of ten. 'passed': the day is over and the tree still hangs here. */
const POUR_VERDICTS = ['holds', 'tight', 'will miss', 'passed', 'not in sight'] as const
export type PourVerdict = (typeof POUR_VERDICTS)[number]

/** The moment and the calendar of the foundry against which a pour is judged. */
export type PourContext = { now: number; timeZone: string; calendar: WorkCalendar }

type PourTree = Pick<QueueTree, 'pourDate' | 'willMissPour' | 'driedOut' | 'state'>

/** Whether the whole shell is dried out in time for its pour; null without a pour date or once it has left the room. */
export function pourVerdict(tree: PourTree, { now, timeZone, calendar }: PourContext): PourVerdict | null {
  if (tree.pourDate === null || tree.state === 'released' || tree.state === 'scrapped') return null
  const deadline = pourDeadline(tree.pourDate, calendar, timeZone)
  const dayAfter = startOfLocalDay(nextDay(tree.pourDate), timeZone)
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
