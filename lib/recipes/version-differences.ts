import { COAT_CELLS, isNeedSame, type CoatCell, type CoatCells } from '@/lib/recipes/coat-cells'

export type CellChange = { key: CoatCell; before: string; after: string }

/** What became of one coat. Numbers count from 1 at the wax; `before` is the one it had. */
export type CoatDifference =
  | { what: 'same' | 'changed' | 'moved'; number: number; before: number; changes: CellChange[] }
  | { what: 'added'; number: number; coat: CoatCells }
  | { what: 'removed'; before: number; coat: CoatCells }

/** How much another text in a cell speaks for another coat. Two coats whose weights pass LEAVE are not the same coat changed. */
const WEIGHTS: Record<CoatCell, number> = {
  kind: 1.7,
  stucco: 0.6,
  bath: 0.4,
  need: 0.2,
  target: 0.2,
  guard: 0.2,
  drain: 0.2,
  longestWait: 0.2,
  prewet: 0.2,
  readAloud: 0.2,
}
/** One coat taken out and another put in cost this much together. */
const LEAVE = 2
/** A coat that is found again elsewhere in the list may differ by this much and still have been moved. */
const SAME_ELSEWHERE = 0.4

const changesOf = (before: CoatCells, after: CoatCells): CellChange[] =>
  COAT_CELLS.filter(({ key }) => before[key] !== after[key]).map(({ key }) => ({ key, before: before[key], after: after[key] }))

const distance = (before: CoatCells, after: CoatCells): number => changesOf(before, after).reduce((sum, { key }) => sum + WEIGHTS[key], 0)

/**
 * What differs between two lists of coats, coat by coat, in the order of the new list; a coat that was taken out stands where it was.
 * Coats have no identity of their own, so the two lists are laid side by side in the way that leaves the least to explain.
 */
export function versionDifferences(before: readonly CoatCells[], after: readonly CoatCells[]): CoatDifference[] {
  const steps = align(before, after)
  const added = new Set(steps.flatMap(({ old, next }) => (old === null && next !== null ? [next] : [])))
  const movedTo = new Map<number, number>()
  for (const { old, next } of steps) {
    if (old === null || next !== null) continue
    const found = [...added].find((index) => distance(before[old]!, after[index]!) <= SAME_ELSEWHERE)
    if (found === undefined) continue
    added.delete(found)
    movedTo.set(found, old)
  }
  const moved = new Set(movedTo.values())
  return steps.flatMap(({ old, next }): CoatDifference[] => {
    if (next === null) {
      return old === null || moved.has(old) ? [] : [{ what: 'removed', before: old + 1, coat: before[old]! }]
    }
    const from = old ?? movedTo.get(next)
    if (from === undefined) return [{ what: 'added', number: next + 1, coat: after[next]! }]
    const changes = changesOf(before[from]!, after[next]!)
    const what = old === null ? 'moved' : changes.length > 0 ? 'changed' : 'same'
    return [{ what, number: next + 1, before: from + 1, changes }]
  })
}

/**
 * Which coats of a list keep the need of another one: for each the index of the coat that it is, where nothing differs that a need rests
 * on; null for the others. What finished coats say of those coats holds on.
 */
export function sameNeeds(before: readonly CoatCells[], after: readonly CoatCells[]): (number | null)[] {
  const from = new Map(
    versionDifferences(before, after).flatMap((difference) =>
      difference.what === 'changed' || difference.what === 'moved' || difference.what === 'same'
        ? [[difference.number - 1, difference.before - 1] as const]
        : [],
    ),
  )
  return after.map((coat, index) => {
    const old = from.get(index)
    return old !== undefined && isNeedSame(before[old]!, coat) ? old : null
  })
}

/** Whether two lists of coats differ in anything. */
export const hasDifferences = (differences: readonly CoatDifference[]): boolean => differences.some(({ what }) => what !== 'same')

/** Said of a coat's difference, in the order of the count. */
export const DIFFERENCE_WORDS = { changed: 'changed', added: 'new', removed: 'taken out', moved: 'moved' } as const

/** How much differs, counted: '2 changed, 1 new, 1 taken out'; '' for nothing. */
export function differencesInShort(differences: readonly CoatDifference[]): string {
  return Object.entries(DIFFERENCE_WORDS)
    .map(([what, word]) => ({ word, count: differences.filter((difference) => difference.what === what).length }))
    .filter(({ count }) => count > 0)
    .map(({ word, count }) => `${count} ${word}`)
    .join(', ')
}

type Step = { old: number | null; next: number | null }

/** The cheapest way from one list to the other by keeping, changing, taking out and putting in. Lists hold at most 40 coats. */
function align(before: readonly CoatCells[], after: readonly CoatCells[]): Step[] {
  const rows = before.length
  const columns = after.length
  const costs = Array.from({ length: rows + 1 }, () => new Float64Array(columns + 1))
  const cost = (row: number, column: number) => costs[row]![column]!
  for (let row = rows; row >= 0; row -= 1) {
    for (let column = columns; column >= 0; column -= 1) {
      if (row === rows || column === columns) {
        costs[row]![column] = ((rows - row + (columns - column)) * LEAVE) / 2
        continue
      }
      costs[row]![column] = Math.min(
        distance(before[row]!, after[column]!) + cost(row + 1, column + 1),
        LEAVE / 2 + cost(row + 1, column),
        LEAVE / 2 + cost(row, column + 1),
      )
    }
  }
  const steps: Step[] = []
  let row = 0
  let column = 0
  while (row < rows || column < columns) {
    const isEnd = row === rows || column === columns
    // Equal ways: keep the coats nearest to the wax together, so that one more of a run is its last.
    if (!isEnd && nearly(cost(row, column), distance(before[row]!, after[column]!) + cost(row + 1, column + 1))) {
      steps.push({ old: row, next: column })
      row += 1
      column += 1
    } else if (row < rows && (column === columns || nearly(cost(row, column), LEAVE / 2 + cost(row + 1, column)))) {
      steps.push({ old: row, next: null })
      row += 1
    } else {
      steps.push({ old: null, next: column })
      column += 1
    }
  }
  return steps
}

// Sums of tenths.
const nearly = (one: number, other: number) => Math.abs(one - other) < 1e-9
