import { TZDate } from '@date-fns/tz'
import type { CurvePoint } from '@/lib/trees/detail-contract'

/** A point as the chart draws it: what is past and what is forecast are two lines that meet at one point. */
export type CurveRow = { at: number; pastPct: number | null; forecastPct: number | null; band: [number, number] }

/** Rows of the drying curve in order of time; the last past point also starts the forecast, so that no gap shows. */
export function curveRows(points: readonly CurvePoint[]): CurveRow[] {
  const ordered = points.toSorted((left, right) => left.at - right.at)
  const lastPast = ordered.findLastIndex((point) => !point.isForecast)
  return ordered.map((point, index) => ({
    at: point.at,
    pastPct: point.isForecast ? null : point.likelyPct,
    forecastPct: point.isForecast || index === lastPast ? point.likelyPct : null,
    band: [Math.min(point.lowPct, point.highPct), Math.max(point.lowPct, point.highPct)],
  }))
}

const HOUR_MS = 3_600_000
const STEPS_HOURS = [1, 2, 3, 6, 12, 24, 48, 168] as const

/**
 * Whole local hours inside a span, at most `most` of them, for the foot of a chart.
 * Steps count from local midnight, so that a clock change keeps the labels on round hours.
 *
 * @throws {RangeError} if the span is not finite or ends before it starts.
 */
export function hourTicks(from: number, to: number, timeZone: string, most = 8): number[] {
  if (!Number.isFinite(from) || !Number.isFinite(to) || to < from) throw new RangeError('The span of a chart ends after it starts.')
  const step = STEPS_HOURS.find((hours) => (to - from) / (hours * HOUR_MS) <= most) ?? Math.ceil((to - from) / HOUR_MS / most)
  const start = new TZDate(from, timeZone)
  const ticks: number[] = []
  for (let hour = 0; ; hour += step) {
    const at = new TZDate(start.getFullYear(), start.getMonth(), start.getDate(), hour, 0, 0, timeZone).getTime()
    if (at > to) return ticks
    if (at >= from && at !== ticks.at(-1)) ticks.push(at)
  }
}

/** A handful of rows that stand for a long series in a table: the first, the last and evenly between. */
export function thinOut<T>(rows: readonly T[], most: number): T[] {
  if (rows.length <= most) return [...rows]
  return Array.from({ length: most }, (_, index) => rows[Math.round((index * (rows.length - 1)) / (most - 1))]!)
}

/** Even bounds for a small chart: whole multiples of `step` that hold every value, at least one step apart. */
export function evenBounds(values: readonly number[], step: number): [number, number] {
  if (values.length === 0) return [0, step]
  const low = Math.floor(Math.min(...values) / step) * step
  const high = Math.ceil(Math.max(...values) / step) * step
  return low === high ? [low, low + step] : [low, high]
}
