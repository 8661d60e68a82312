import { millisecondsInHour } from 'date-fns/constants'
import type { Warning } from '@/lib/queue/contract'
import { HORIZON_HOURS } from '@/lib/room/climate'
import { pourDeadline, type WorkCalendar } from '@/lib/schedule/shifts'
import { assessTree, type Assessment } from '@/lib/trees/assess'
import type { TreeFacts } from '@/lib/trees/facts'
import { playForward, type PlayedForward } from '@/lib/trees/play-forward'
import type { FloorContext } from '@/lib/trees/spans'
import { treeWarnings } from '@/lib/trees/warnings'

/** Everything that any screen, notice or command needs to know of a tree at one moment. */
export type DerivedTree = Assessment & PlayedForward & { willMissPour: boolean; warnings: Warning[] }

/**
 * Derives a tree: its state, its times, its future and its warnings.
 * A coat that may be dipped over while the pour date is already lost is overdue, like one past its longest wait.
 */
export function deriveTree(facts: TreeFacts, context: FloorContext, calendar: WorkCalendar): DerivedTree {
  const assessment = assessTree(facts, context)
  const played = playForward(assessment, context)
  const willMissPour = missesPour(assessment, played, context, calendar)
  const isLost = willMissPour && (assessment.state === 'dip now' || assessment.state === 'waiting')
  return {
    ...assessment,
    ...played,
    ...(isLost ? { state: 'overdue' as const, stateSince: assessment.dippableSince } : {}),
    willMissPour,
    warnings: treeWarnings(assessment, context, { willMissPour }),
  }
}

/** True when even the likely time of drying out lies after the pour's deadline, or the deadline has gone by before the shell was ready. */
function missesPour({ facts, state }: Assessment, { driedOut }: PlayedForward, context: FloorContext, calendar: WorkCalendar): boolean {
  if (facts.pourDate === null || ['released', 'scrapped', 'ready for burnout', 'dried out'].includes(state)) return false
  const deadline = pourDeadline(facts.pourDate, calendar, context.timeZone)
  if (context.now > deadline) return true
  if (driedOut === null) return false
  // Beyond the horizon nobody can say; a deadline within it is lost.
  const horizon = context.now + HORIZON_HOURS * millisecondsInHour
  return driedOut.likelyAt === null ? deadline <= horizon : driedOut.likelyAt > deadline
}
