import type { NoticeKey, NoticeKind, OpenNotice } from '@/lib/notices/notice'
import { noticeChanges, REOPEN_DWELL_MS } from '@/lib/notices/notice-rules'
import type { QueueTree } from '@/lib/queue/contract'
import type { TreeState } from '@/lib/trees/states'
import { buildQueue, buildQueueRoom, buildQueueTree, NOW, testId } from '@/tests/factories/queue'

const MINUTE_MS = 60_000

/** Small seeded generator (mulberry32): a failing seed can be run again. */
export function seeded(seed: number): () => number {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let mixed = Math.imul(state ^ (state >>> 15), 1 | state)
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), 61 | mixed)) ^ mixed
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296
  }
}

type SimTree = {
  n: number
  coat: number
  dippedAt: number
  /** Minutes of credited drying still missing. */
  missing: number
  dryAt: number | null
  held: boolean
  gone: boolean
}

type Told = NoticeKey & { episode: number; openedAt: number; closedAt: number | null; id: string; treeId: string | null }

const COATS = 3
const LONGEST_WAIT_MS = 9 * 3_600_000

/**
 * 24 hours of a small shell room, minute by minute: coats dry, rooms fall silent, late readings take dryness back, trees are held,
 * dipped, taken back and released, the worker misses minutes and hours, and a second worker runs now and then.
 *
 * @returns every broken promise as a sentence; none is the only good answer.
 */
export function simulateDay(seed: number): { faults: string[]; told: number } {
  const random = seeded(seed)
  const chance = (odds: number) => random() < odds
  const told: Told[] = []
  const faults: string[] = []
  /** Passes in a row in which a thing was true while nothing kept it from being told. */
  const untold = new Map<string, number>()
  const trees: SimTree[] = Array.from({ length: 4 }, (_, n) => fresh(n, 1, NOW - Math.floor(random() * 600) * MINUTE_MS, random))
  let silentUntil = 0
  let silentSince = 0
  let downUntil = 0

  for (let now = NOW; now < NOW + 24 * 3_600_000; now += MINUTE_MS) {
    if (now > silentUntil && chance(0.004)) {
      silentSince = now
      silentUntil = now + Math.floor(random() * 120) * MINUTE_MS
    }
    const isSilent = now <= silentUntil
    const isStale = isSilent && now - silentSince > 30 * MINUTE_MS
    for (const tree of trees) live(tree, now, isStale, random)
    if (now > downUntil && chance(0.004)) downUntil = now + Math.floor(random() * 300) * MINUTE_MS
    if (now <= downUntil || chance(0.01)) continue

    const queue = buildQueue({
      now,
      rooms: [buildQueueRoom({ isStale })],
      trees: trees.filter(({ gone }) => !gone).map((tree) => toQueueTree(tree, now, isStale)),
    })
    // A doubled worker reads what the first one wrote, so the second pass must change nothing.
    for (let worker = 0; worker < (chance(0.2) ? 2 : 1); worker += 1) {
      const open = told.filter(({ closedAt }) => closedAt === null)
      const closed = told.flatMap((notice) => (notice.closedAt === null ? [] : [{ ...notice, closedAt: notice.closedAt }]))
      const changes = noticeChanges({ queue, open: open satisfies OpenNotice[], closed, now })
      if (worker > 0 && changes.open.length + changes.close.length > 0) faults.push(`${seed}: a second pass at ${now} changed something`)
      for (const { id } of changes.close) told.find((notice) => notice.id === id)!.closedAt = now
      for (const draft of changes.open) {
        const before = told.filter((notice) => keyOf(notice) === keyOf(draft))
        if (before.some(({ closedAt }) => closedAt === null)) faults.push(`${seed}: ${keyOf(draft)} opened twice at ${now}`)
        const last = before.at(-1)
        if (last && draft.kind !== 'call withdrawn' && now - last.closedAt! < REOPEN_DWELL_MS) {
          faults.push(`${seed}: ${keyOf(draft)} flapped`)
        }
        told.push({ ...draft, id: `${told.length}`, episode: before.length + 1, openedAt: now, closedAt: null })
      }
      if (isStale && changes.close.some(({ id }) => told.find((notice) => notice.id === id)!.kind === 'coat dry')) {
        const wrong = changes.close.filter(({ reason }) => reason === 'withdrawn by late data')
        if (wrong.length > 0) faults.push(`${seed}: silence took a call back at ${now}`)
      }
    }
    for (const [kind, id] of truths(queue.trees, isStale)) {
      const key = `${kind} ${id}`
      const mine = told.filter((notice) => notice.kind === kind && notice.subjectId === id)
      const isResting = mine.some(({ closedAt }) => closedAt !== null && now - closedAt < REOPEN_DWELL_MS)
      const isOpen = mine.some(({ closedAt }) => closedAt === null)
      untold.set(key, isOpen || isResting ? 0 : (untold.get(key) ?? 0) + 1)
      if (untold.get(key)! > 2) faults.push(`${seed}: ${key} was missed at ${now}`)
    }
  }
  return { faults, told: told.length }
}

function fresh(n: number, coat: number, dippedAt: number, random: () => number): SimTree {
  return { n, coat, dippedAt, missing: 60 + Math.floor(random() * 300), dryAt: null, held: false, gone: false }
}

function live(tree: SimTree, now: number, isStale: boolean, random: () => number): void {
  if (tree.gone) return
  if (random() < 0.002) tree.held = !tree.held
  if (!isStale && !tree.held) tree.missing -= 1
  // Late readings show wetter air than was thought, or somebody's damp rack.
  if (!isStale && random() < 0.004) tree.missing += 1 + Math.floor(random() * 40)
  // A value that sits on its limit.
  if (!isStale && Math.abs(tree.missing) < 3 && random() < 0.5) tree.missing += random() < 0.5 ? 2 : -1
  tree.dryAt = tree.missing > 0 ? null : (tree.dryAt ?? now)
  if (tree.dryAt !== null && now - tree.dryAt > 30 * MINUTE_MS && random() < 0.02) {
    if (tree.coat >= COATS) tree.gone = true
    else Object.assign(tree, fresh(tree.n, tree.coat + 1, now, random))
  } else if (tree.coat > 1 && random() < 0.0005) {
    // Taken back: the coat below is the newest again, and dry.
    Object.assign(tree, { coat: tree.coat - 1, missing: -10, dryAt: now })
  }
}

function stateOf(tree: SimTree, now: number, isStale: boolean): TreeState {
  const allOn = tree.coat === COATS
  if (tree.held) return 'held'
  if (!allOn && now - tree.dippedAt > LONGEST_WAIT_MS) return 'overdue'
  if (tree.dryAt !== null) return allOn ? 'dried out' : now - tree.dryAt < MINUTE_MS ? 'dip now' : 'waiting'
  if (isStale) return 'unknown'
  return allOn ? 'last coat on' : tree.missing < 30 ? 'nearly dry' : 'drying'
}

function toQueueTree(tree: SimTree, now: number, isStale: boolean): QueueTree {
  const safeAt = tree.dryAt ?? now + tree.missing * MINUTE_MS
  return buildQueueTree({
    id: testId(1, tree.n),
    tag: `T-${tree.n}`,
    state: stateOf(tree, now, isStale),
    coatsOn: tree.coat,
    newestCoat: { id: testId(2, tree.n * 100 + tree.coat), number: tree.coat, dippedAt: tree.dippedAt },
    dry: { earliestAt: null, likelyAt: safeAt, safeAt },
    warnings: isStale && tree.dryAt === null ? [{ code: 'unknown', level: 'warn', text: 'No readings' }] : [],
    ...(tree.coat === COATS ? { next: null } : {}),
  })
}

function truths(trees: readonly QueueTree[], isStale: boolean): [NoticeKind, string][] {
  return [
    ...trees.flatMap((tree): [NoticeKind, string][] => [
      ...(['dip now', 'waiting', 'dried out'].includes(tree.state) ? [['coat dry', tree.newestCoat!.id] as [NoticeKind, string]] : []),
      ...(tree.state === 'overdue' ? [['overdue', tree.newestCoat!.id] as [NoticeKind, string]] : []),
      ...(tree.next === null ? [['last coat on', tree.newestCoat!.id] as [NoticeKind, string]] : []),
    ]),
    ...(isStale && trees.length > 0 ? [['room data stale', '1'] as [NoticeKind, string]] : []),
  ]
}

function keyOf({ kind, subjectType, subjectId }: NoticeKey): string {
  return `${kind} ${subjectType} ${subjectId}`
}
