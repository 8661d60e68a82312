import { pourVerdict, type PourContext, type PourVerdict } from '@/lib/burnout/pour-verdict'
import { localDay } from '@/lib/format/local-time'
import type { QueueTree } from '@/lib/queue/contract'
import { shiftsFrom, startOfLocalDay } from '@/lib/schedule/shifts'

/** Width of one open day and of one closed day, px, before the path is fitted. */
const OPEN_DAY = 255
const CLOSED_DAY = 60
const DAY_MS = 86_400_000
/** Beyond this the paving says nothing that the tables do not say better. */
const MOST_DAYS = 9
const MOST_SHELLS = 14
/** Room for a tag and a pair of times, and for the verdict behind them. */
const LABEL_WIDTH = 226
const VERDICT_WIDTH = 76
const LEVELS = 4
/** Shells nearer than this stand as one: a run that was dipped together dries together. */
const SHOULDER = 16

export type PathDay = { day: string; x: number; width: number; isOpen: boolean }
/** One or more shells at one spot of the way. The times are the latest of them, the verdict the gravest. */
export type PathStand = {
  trees: QueueTree[]
  likelyX: number
  safeX: number
  likelyAt: number
  safeAt: number
  verdict: PourVerdict | null
  /** The label's left edge, and its height, 0 lowest; null where no room is left for one. */
  label: { x: number; width: number; level: number } | null
}
export type KilnPath = { days: PathDay[]; stands: PathStand[]; width: number; moreCount: number }

const GRAVITY: readonly (PourVerdict | null)[] = ['passed', 'will miss', 'tight', 'not in sight', 'holds', null]

function graver(left: PourVerdict | null, right: PourVerdict | null): PourVerdict | null {
  return GRAVITY.indexOf(left) <= GRAVITY.indexOf(right) ? left : right
}

/**
 * The way of drying trees to the kiln door: paving by day, each shell at the moment it is safe.
 *
 * Trees without a safe time in sight and those beyond the paving are counted, not drawn.
 */
export function kilnPath(trees: readonly QueueTree[], context: PourContext, width: number): KilnPath {
  const { now, timeZone, calendar } = context
  const all = trees
    .flatMap((tree) => {
      const pair = tree.next === null ? tree.dry : tree.driedOut
      return pair?.safeAt == null || pair.likelyAt === null ? [] : [{ tree, likelyAt: pair.likelyAt, safeAt: Math.max(pair.safeAt, now) }]
    })
    .toSorted((left, right) => left.safeAt - right.safeAt)
  const horizon = startOfLocalDay(localDay(now + MOST_DAYS * DAY_MS, timeZone), timeZone)
  const drawn = all.filter((shell) => shell.safeAt < horizon).slice(0, MOST_SHELLS)
  const lastAt = drawn.at(-1)?.safeAt ?? now

  const openDays = new Set(shiftsFrom(now - DAY_MS, calendar, timeZone).map((shift) => localDay(shift.opensAt, timeZone)))
  const plan: { day: string; from: number; to: number; weight: number; isOpen: boolean }[] = []
  for (let from = now; from <= lastAt && plan.length <= MOST_DAYS;) {
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

  const stands: Omit<PathStand, 'label'>[] = []
  for (const { tree, likelyAt, safeAt } of drawn) {
    const [safeX, likelyX] = [xAt(safeAt), xAt(likelyAt)]
    const verdict = pourVerdict(tree, context)
    const near = stands.at(-1)
    if (near && safeX - near.safeX < SHOULDER) {
      near.trees.push(tree)
      if (likelyAt > near.likelyAt) Object.assign(near, { likelyAt, likelyX })
      near.safeAt = safeAt
      near.verdict = graver(near.verdict, verdict)
    } else {
      stands.push({ trees: [tree], likelyX, safeX, likelyAt, safeAt, verdict })
    }
  }
  return {
    days: spans.map(({ day, x: left, width: wide, isOpen }) => ({ day, x: left, width: wide, isOpen })),
    stands: labelled(stands, x),
    width: x,
    moreCount: all.length - drawn.length,
  }
}

/** Gives each stand the lowest label that covers no other; those at the door move theirs to the left. */
function labelled(stands: readonly Omit<PathStand, 'label'>[], width: number): PathStand[] {
  const taken: { from: number; to: number }[][] = Array.from({ length: LEVELS }, () => [])
  return stands.map((stand) => {
    const wide = LABEL_WIDTH + (stand.verdict === null || stand.verdict === 'holds' ? 0 : VERDICT_WIDTH)
    const from = Math.max(0, Math.min(stand.safeX - 6, width - wide))
    const to = from + wide
    const level = taken.findIndex((labels) => labels.every((label) => to <= label.from || from >= label.to))
    if (level === -1) return { ...stand, label: null }
    taken[level]?.push({ from, to })
    return { ...stand, label: { x: from, width: wide, level } }
  })
}
