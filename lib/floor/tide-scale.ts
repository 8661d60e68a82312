import { dayWord, formatClock, formatWeekday } from '@/lib/format/local-time'
import type { Queue } from '@/lib/queue/contract'

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS

/** Shares of the axis while a shift has two hours or more to go. */
const REST_SHARE = 0.5
const NIGHT_SHARE = 0.28
const NEXT_SHARE = 0.22
/** With less than this left of the shift its part shrinks, else five minutes would be as wide as a night. */
const FULL_REST_MS = 2 * HOUR_MS
const LEAST_REST_PART = 0.3
/** Room that one tick needs, as a share of the axis. */
const TICK_WIDTH = 0.085
/** Ticks closer to a border of two zones than this are left out: their hour would run into the border. */
const TICK_MARGIN = 0.038

export type TideZone = { kind: 'shift' | 'night' | 'next'; label: string; from: number; to: number; startsAt: number; endsAt: number }
export type TideTick = { at: number; position: number; label: string }
export type TideScale = {
  zones: TideZone[]
  ticks: TideTick[]
  /** Where the axis ends; what is due later stands at the right edge with its day. */
  endsAt: number
  /** Position of an instant on the axis, 0 (now) to 1 (the end). */
  position: (at: number) => number
}

/**
 * The axis of the tide: the rest of this shift, the night, and the next shift, each straight in itself.
 *
 * The next hours matter by the quarter of an hour, the night hardly: so they get half the width and a quarter. Closed days lie in
 * the night. Outside the shift the axis begins with the night.
 *
 * Units: instants in epoch ms, positions as shares of the width.
 */
export function tideScale(now: number, shift: Queue['shift'], timeZone: string): TideScale {
  const shiftEnd = shift.isOpen ? Math.max(now, shift.endsAt) : now
  const nightEnd = Math.max(shiftEnd, shift.nextStartsAt)
  const nextEnd = Math.max(nightEnd, shift.nextEndsAt)
  const rest = shiftEnd - now
  const restPart = rest <= 0 ? 0 : Math.max(LEAST_REST_PART, Math.min(1, rest / FULL_REST_MS))
  const weights = [REST_SHARE * restPart, nightEnd > shiftEnd ? NIGHT_SHARE : 0, nextEnd > nightEnd ? NEXT_SHARE : 0]
  const sum = weights.reduce((total, weight) => total + weight, 0) || 1
  const borders = [0, 0, 0, 0]
  weights.forEach((weight, index) => {
    borders[index + 1] = (borders[index] ?? 0) + weight / sum
  })
  const [, first = 0, second = 0] = borders

  const zones: TideZone[] = []
  if (first > 0) zones.push({ kind: 'shift', label: 'This shift', from: 0, to: first, startsAt: now, endsAt: shiftEnd })
  if (second > first) {
    zones.push({ kind: 'night', label: nightLabel(shiftEnd, nightEnd), from: first, to: second, startsAt: shiftEnd, endsAt: nightEnd })
  }
  if (second < 1) {
    zones.push({
      kind: 'next',
      label: dayWord(nightEnd, now, timeZone) || 'Next shift',
      from: second,
      to: 1,
      startsAt: nightEnd,
      endsAt: nextEnd,
    })
  }

  const position = (at: number): number => {
    if (at <= now) return 0
    for (const zone of zones) {
      if (at <= zone.endsAt) return zone.from + (zone.to - zone.from) * ((at - zone.startsAt) / Math.max(1, zone.endsAt - zone.startsAt))
    }
    return 1
  }

  return { zones, ticks: zones.flatMap((zone) => ticksOf(zone, timeZone)), endsAt: nextEnd, position }
}

/** 'Night' for one, 'Closed' for what is longer: a weekend is no night. */
function nightLabel(from: number, to: number): string {
  return to - from > 20 * HOUR_MS ? 'Closed' : 'Night'
}

/** Whole local hours inside a zone, at the finest step at which they stand apart. Over a long closing only the days. */
function ticksOf(zone: TideZone, timeZone: string): TideTick[] {
  const share = zone.to - zone.from
  const most = Math.max(1, Math.floor(share / TICK_WIDTH))
  const byDay = zone.endsAt - zone.startsAt > 30 * HOUR_MS
  const hours: (TideTick & { hour: number })[] = []
  const quarter = 15 * MINUTE_MS
  for (let at = Math.ceil(zone.startsAt / quarter) * quarter; at < zone.endsAt; at += quarter) {
    const clock = formatClock(at, timeZone)
    if (!clock.endsWith(':00')) continue
    const position = zone.from + share * ((at - zone.startsAt) / (zone.endsAt - zone.startsAt))
    if (position < zone.from + TICK_MARGIN || position > zone.to - TICK_MARGIN) continue
    hours.push({ at, position, hour: Number(clock.slice(0, 2)), label: byDay ? formatWeekday(at, timeZone) : clock.slice(0, 2) })
  }
  const steps = byDay ? [1, 2, 3, 7] : [1, 2, 3, 4, 6, 12, 24]
  // A day is named at its noon.
  const marks = byDay ? hours.filter(({ hour }) => hour === 12) : hours
  const fitting =
    steps.map((step) => marks.filter(({ hour }, index) => (byDay ? index : hour) % step === 0)).find((ticks) => ticks.length <= most) ?? []
  return fitting.map(({ at, position, label }) => ({ at, position, label }))
}
