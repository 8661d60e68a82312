import { pourVerdict, type PourContext, type PourVerdict } from '@/lib/burnout/pour-verdict'
import type { QueueTree } from '@/lib/queue/contract'
import { localDay, shiftsFrom, startOfLocalDay } from '@/lib/schedule/shifts'

/** Width of one open day and of one closed day, px, before the path is fitted. */
const OPEN_DAY = 255
const CLOSED_DAY = 60
const DAY_MS = 86_400_000
/** Beyond this the paving says nothing that the tables do not say better. */
const MOST_DAYS = 9
const MOST_SHELLS = 14
const LABEL_WIDTH = 196
const LEVELS = 4

export type PathDay = { day: string; x: number; width: number; isOpen: boolean }
export type PathShell = {
  tree: QueueTree
  likelyX: number
  safeX: number
  likelyAt: number
  safeAt: number
  verdict: PourVerdict | null
  /** Height of the label, 0 lowest. */
  level: number
}
export type KilnPath = { days: PathDay[]; shells: PathShell[]; width: number; isMoreLater: number }

/**
 * The way of drying trees to the kiln door: paving by day, each shell at the moment it is safe.
 *
 * Trees without a safe time in sight and those beyond the paving are counted, not drawn.
 */
export function kilnPath(trees: readonly QueueTree[], context: PourContext, width: number): KilnPath {
  const { now, timeZone, shiftHours } = context
  const all = trees
    .flatMap((tree) => {
      const pair = tree.next === null ? tree.dry : tree.driedOut
      return pair?.safeAt == null || pair.likelyAt === null ? [] : [{ tree, likelyAt: pair.likelyAt, safeAt: Math.max(pair.safeAt, now) }]
    })
    .toSorted((left, right) => left.safeAt - right.safeAt)
  const horizon = startOfLocalDay(localDay(now + MOST_DAYS * DAY_MS, timeZone), timeZone)
  const drawn = all.filter((shell) => shell.safeAt < horizon).slice(0, MOST_SHELLS)
  const lastAt = drawn.at(-1)?.safeAt ?? now

  const openDays = new Set(shiftsFrom(now - DAY_MS, shiftHours, timeZone).map((shift) => localDay(shift.opensAt, timeZone)))
  const plan: { day: string; from: number; to: number; weight: number; isOpen: boolean }[] = []
  for (let from = now; from <= lastAt && plan.length <= MOST_DAYS; ) {
    const day = localDay(from, timeZone)
    const start = startOfLocalDay(day, timeZone)
    // Noon is in every day, also in those of 23 and 25 hours.
    const to = startOfLocalDay(localDay(start + 1.5 * DAY_MS, timeZone), timeZone)
    const isOpen = openDays.has(day)
    const share = (to - from) / (to - start)
    plan.push({ day, from, to, isOpen, weight: (isOpen ? OPEN_DAY : CLOSED_DAY) * Math.max(share, plan.length === 0 ? 0.35 : 0) })
    from = to
  }
  const total = plan.reduce((sum, day) => sum + day.weight, 0)
  const scale = total === 0 ? 1 : Math.min(1.6, width / total)
  let x = 0
  const spans = plan.map((day) => {
    const span = { ...day, x, width: day.weight * scale }
    x += span.width
    return span
  })
  const xAt = (at: number) => {
    const span = spans.find((candidate) => at < candidate.to) ?? spans.at(-1)
    if (!span || at <= span.from) return span?.x ?? 0
    return span.x + (span.width * (Math.min(at, span.to) - span.from)) / (span.to - span.from)
  }

  const busyUntil = Array.from({ length: LEVELS }, () => Number.NEGATIVE_INFINITY)
  const shells = drawn.map((shell): PathShell => {
    const safeX = xAt(shell.safeAt)
    const free = busyUntil.findIndex((until) => until <= safeX)
    const level = free === -1 ? busyUntil.indexOf(Math.min(...busyUntil)) : free
    busyUntil[level] = safeX + LABEL_WIDTH
    return { ...shell, safeX, likelyX: xAt(shell.likelyAt), verdict: pourVerdict(shell.tree, context), level }
  })
  return {
    days: spans.map(({ day, x: left, width: wide, isOpen }) => ({ day, x: left, width: wide, isOpen })),
    shells,
    width: x,
    isMoreLater: all.length - drawn.length,
  }
}
