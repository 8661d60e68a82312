import { millisecondsInHour } from 'date-fns/constants'
import { PULL_WORDS, pullWord, VERY_SLOW_SPEED } from '@/lib/room/drying-pull'
import type { RoomPoint } from '@/lib/room/series'

/** A stretch of the ribbon under one word, with its mean speed as a share of the reference speed. */
export type RibbonRun = { from: number; to: number; word: string; speed: number; isForecast: boolean }

/** Shorter stretches have no room for a word: they take that of their longer neighbour. */
const SHORTEST_RUN_MS = 3 * millisecondsInHour

/** How far a point speaks to either side, where no other is nearer: each stands for an hour, or for a day of up to 25. */
const reachMs = ({ kind }: RoomPoint): number => (kind === 'day' ? 12.5 : 0.5) * millisecondsInHour

type Cell = { from: number; to: number; word: string; speed: number; isForecast: boolean }

/** Each point with the time it speaks for: half way to its neighbours. */
function cellsOf(points: readonly RoomPoint[], now: number): Cell[] {
  const known = points.filter((point) => point.speed !== null && point.kind !== 'now')
  return known.map((point, index) => {
    const isForecast = point.kind === 'forecast'
    const before = known[index - 1]
    const after = known[index + 1]
    const left = before ? (before.at + point.at) / 2 : -Infinity
    const right = after ? (point.at + after.at) / 2 : Infinity
    const from = Math.max(point.at - reachMs(point), left, isForecast ? now : -Infinity)
    const to = Math.min(point.at + reachMs(point), right, isForecast ? Infinity : now)
    const speed = point.speed?.likely ?? 0
    return { from, to, speed, isForecast, word: pullWord({ roomFactor: speed, wetBulbGapK: point.wetBulbGapK?.likely ?? 0 }) }
  })
}

/** Joins neighbours for which `isOne` holds; their speeds are weighed by their time. */
function joined(cells: readonly Cell[], isOne: (left: Cell, right: Cell) => boolean): Cell[] {
  const runs: Cell[] = []
  for (const cell of cells) {
    const last = runs.at(-1)
    if (last && last.isForecast === cell.isForecast && cell.from - last.to < 1 && isOne(last, cell)) {
      runs[runs.length - 1] = merged(last, cell, last.word)
    } else runs.push(cell)
  }
  return runs
}

function merged(left: Cell, right: Cell, word: string): Cell {
  const [one, other] = [left.to - left.from, right.to - right.from]
  const speed = one + other > 0 ? (left.speed * one + right.speed * other) / (one + other) : left.speed
  return { from: left.from, to: right.to, word, speed, isForecast: left.isForecast }
}

/**
 * The words along the ribbon: 'Good 92 %', 'Very slow 59 %'. Past and forecast are never one stretch; a stretch of under
 * `shortestMs`, three hours of the two days, goes into the longer of its neighbours.
 */
export function ribbonRuns(points: readonly RoomPoint[], now: number, shortestMs = SHORTEST_RUN_MS): RibbonRun[] {
  let runs = withOneWord(cellsOf(points, now))
  for (;;) {
    const shortest = runs
      .map((run, index) => ({ index, length: run.to - run.from }))
      .filter(({ index, length }) => length < shortestMs && neighbours(runs, index).length > 0)
      .toSorted((a, b) => a.length - b.length)[0]
    if (shortest === undefined) break
    const { index } = shortest
    const into = neighbours(runs, index).toSorted((a, b) => runs[b]!.to - runs[b]!.from - (runs[a]!.to - runs[a]!.from))[0]!
    const [left, right] = [Math.min(index, into), Math.max(index, into)]
    runs = withOneWord(runs.toSpliced(left, 2, merged(runs[left]!, runs[right]!, runs[into]!.word)))
  }
  // The word is that of the whole stretch's own mean, unless a face coat would suffer.
  return withOneWord(
    runs.map((run) => ({
      ...run,
      word: run.word === PULL_WORDS['too dry for face coats'] ? run.word : pullWord({ roomFactor: run.speed, wetBulbGapK: 0 }),
    })),
  )
}

const withOneWord = (cells: readonly Cell[]) => joined(cells, (left, right) => left.word === right.word)

function neighbours(runs: readonly Cell[], index: number): number[] {
  const run = runs[index]!
  return [index - 1, index + 1].filter((candidate) => {
    const other = runs[candidate]
    if (!other || other.isForecast !== run.isForecast) return false
    return candidate < index ? run.from - other.to < 1 : other.from - run.to < 1
  })
}

/** Stretches that dry at under 70 % of the reference speed: they are lined. */
export function linedStretches(points: readonly RoomPoint[], now: number): { from: number; to: number }[] {
  const slow = cellsOf(points, now).filter((cell) => cell.speed < VERY_SLOW_SPEED)
  return joined(slow, () => true).map(({ from, to }) => ({ from, to }))
}
