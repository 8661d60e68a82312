import { dueAt } from '@/lib/floor/arrange'
import type { TideScale } from '@/lib/floor/tide-scale'
import type { QueueTree } from '@/lib/queue/contract'

/** One row of the tide: a tree, or several that were dipped in one run and come due together. */
export type TideRow = { key: string; trees: QueueTree[] }

const MINUTE_MS = 60_000
const sameMinute = (a: number | null, b: number | null) =>
  a === b || (a !== null && b !== null && Math.floor(a / MINUTE_MS) === Math.floor(b / MINUTE_MS))

/** True when two trees went through one run stand at the same coat of as many, and the floor would do the next thing with both at once. */
function isOneRun(a: QueueTree, b: QueueTree): boolean {
  return (
    a.state === b.state &&
    a.newestCoat !== null &&
    b.newestCoat !== null &&
    a.coatsOn === b.coatsOn &&
    a.coats.length === b.coats.length &&
    a.newestCoat.dippedAt === b.newestCoat.dippedAt &&
    a.next?.bathId === b.next?.bathId &&
    a.next?.stucco === b.next?.stucco &&
    sameMinute(a.dry?.likelyAt ?? null, b.dry?.likelyAt ?? null) &&
    sameMinute(a.dry?.safeAt ?? null, b.dry?.safeAt ?? null)
  )
}

/** Rows in the order of the trees; a run becomes one row where its first tree stands. */
export function tideRows(drying: readonly QueueTree[]): TideRow[] {
  const rows: TideRow[] = []
  for (const tree of drying) {
    const row = rows.find((candidate) => isOneRun(candidate.trees[0]!, tree))
    if (row) row.trees.push(tree)
    else rows.push({ key: tree.id, trees: [tree] })
  }
  return rows
}

export type TidePage = { rows: TideRow[]; page: number; pages: number; laterRows: TideRow[]; laterTrees: number }

/** The rows of one page. `capacity` is how many whole rows fit beside the page key. */
export function tidePage(rows: readonly TideRow[], capacity: { all: number; withPageKey: number }, page: number): TidePage {
  if (rows.length <= capacity.all) return { rows: [...rows], page: 0, pages: 1, laterRows: [], laterTrees: 0 }
  const size = Math.max(1, capacity.withPageKey)
  const pages = Math.ceil(rows.length / size)
  const current = Math.min(Math.max(0, page), pages - 1)
  const laterRows = rows.slice((current + 1) * size)
  return {
    rows: rows.slice(current * size, (current + 1) * size),
    page: current,
    pages,
    laterRows,
    laterTrees: laterRows.reduce((sum, row) => sum + row.trees.length, 0),
  }
}

export type TidePlacement = {
  /** Water from now to likely, wet sand from likely to safe; shares of the width. Null where nobody knows. */
  water: { likely: number; safe: number; isLikelyBeyond: boolean; isSafeBeyond: boolean } | null
  label: { side: 'right' | 'inside' | 'over'; /** px from the left. */ left: number; /** px at hand. */ width: number }
}

/** Wet sand up to here leaves the label the free right half. */
const LABEL_RIGHT_UNTIL = 0.51
const WATER_EDGE_PX = 5

/**
 * Where the water of a row ends and where its label goes: right of the safe edge while that leaves it room, else inside the water,
 * else across the row at its left end.
 *
 * @param leastLabel px that the label's times need at the least; the title is shortened before they are.
 */
export function placeRow(tree: QueueTree, scale: TideScale, width: number, leastLabel: number): TidePlacement {
  if (tree.state === 'unknown' || dueAt(tree) === null) return { water: null, label: { side: 'right', left: 0, width } }
  const likelyAt = tree.dry?.likelyAt ?? null
  const safeAt = tree.dry?.safeAt ?? null
  const likely = likelyAt === null ? 1 : scale.position(likelyAt)
  const safe = Math.max(likely, safeAt === null ? 1 : scale.position(safeAt))
  const water = {
    likely,
    safe,
    isLikelyBeyond: likelyAt === null || likelyAt > scale.endsAt,
    isSafeBeyond: safeAt === null || safeAt > scale.endsAt,
  }
  const right = width * (1 - safe)
  const inside = width * likely - WATER_EDGE_PX
  if (right >= leastLabel && (safe <= LABEL_RIGHT_UNTIL || inside < leastLabel)) {
    return { water, label: { side: 'right', left: width * safe, width: right } }
  }
  if (inside >= leastLabel) return { water, label: { side: 'inside', left: 0, width: inside } }
  return right >= inside
    ? {
        water,
        label: {
          side: 'over',
          left: Math.max(0, width - Math.max(leastLabel, right)),
          width: Math.min(width, Math.max(leastLabel, right)),
        },
      }
    : { water, label: { side: 'over', left: 0, width: Math.min(width, leastLabel) } }
}
