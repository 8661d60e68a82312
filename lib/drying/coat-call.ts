import { millisecondsInMinute } from 'date-fns/constants'
import { moistureRatio } from '@/lib/drying/moisture'
import { needBand, sigma } from '@/lib/drying/need'
import { holdsUntil, onePerInstant } from '@/lib/drying/room-segments'
import { doseOverSpans, instantWhenDose } from '@/lib/drying/tree-dose'
import type { CoatCall, CoatForClock, DryingSpan, Instant, RoomReading, WindowReadings } from '@/lib/drying/types'

export type CallCoatInput = {
  coat: CoatForClock
  /** Readings up to now, forecast from now on: a span that holds a forecast starts at `now` or later. */
  spans: readonly DryingSpan[]
  now: Instant
  readings: WindowReadings
}

/**
 * The drying clock's call on one coat: its dose, moisture and the three times at which it is dry.
 *
 * - likely: the likely dose reaches the need; safe: the low dose reaches the need's P90; earliest: the high dose its P10.
 * - A rough dip time moves the earliest time forward and the safe time back by its half width.
 * - Nothing is credited before the first reading after the start, unless a reading still held at the start.
 * - A lone typed reading never makes a coat safe.
 *
 * @throws {RangeError} if the need or the target is out of range.
 * @source our own model.
 */
export function callCoat({ coat, spans, now, readings }: CallCoatInput): CoatCall {
  const { hasTyped, needsConfirmation, hasUsable } = evidenceOf(coat, readings)
  const spread = sigma({ recessClass: coat.recessClass, hasTyped, baseSigma: coat.baseSigma, airSigma: coat.airSigma })
  const need = needBand(coat.needReferenceHours, spread)
  const from = creditedFrom(coat, now, readings)
  const roughMs = coat.roughMinutes * millisecondsInMinute

  const dose = doseOverSpans(spans, from, now)
  const likelyAt = instantWhenDose(spans, from, need.likely, 'likely')
  const earliestAt = shift(instantWhenDose(spans, from, need.low, 'high'), -roughMs)
  const safeByDoseAt = shift(instantWhenDose(spans, from, need.high, 'low'), roughMs)
  const safeAt = needsConfirmation && isReached(safeByDoseAt, now) ? null : safeByDoseAt

  const guardAt = coat.guard === 'safe' ? safeAt : likelyAt
  const guardReachedAt = isReached(guardAt, now) ? guardAt : null
  const isStale = readings.newest === null || holdsUntil(readings.newest) < now
  return {
    creditedFrom: from,
    dose,
    need,
    moistureRatio: moistureRatio(dose.likely, need.likely, coat.moistureTarget, coat.pageExponent),
    earliestAt,
    likelyAt,
    safeAt,
    guardReachedAt,
    isLikelyDry: isReached(likelyAt, now),
    isSafeDry: isReached(safeAt, now),
    isUnknown: guardReachedAt === null && (!hasUsable || isStale),
    needsConfirmation,
    sigma: spread,
  }
}

/** Marks of the readings of one room that stand behind a coat. For a tree that was moved, join the rooms of its stays first. */
export function windowReadings(readings: readonly RoomReading[], clockStartsAt: Instant, now: Instant): WindowReadings {
  const ordered = onePerInstant(readings.filter((reading) => reading.measuredAt <= now))
  const inWindow = ordered.filter((reading) => reading.measuredAt > clockStartsAt)
  return {
    sensorCount: inWindow.filter((reading) => reading.source === 'sensor').length,
    typedCount: inWindow.filter((reading) => reading.source === 'typed').length,
    lastBeforeStart: ordered.findLast((reading) => reading.measuredAt <= clockStartsAt) ?? null,
    firstInWindowAt: inWindow[0]?.measuredAt ?? null,
    newest: ordered.at(-1) ?? null,
  }
}

/** Whether a reading from before the start still held at the start, and so counts for the window. */
function heldAtStart({ clockStartsAt }: Pick<CoatForClock, 'clockStartsAt'>, { lastBeforeStart }: WindowReadings): boolean {
  return lastBeforeStart !== null && holdsUntil(lastBeforeStart) >= clockStartsAt
}

/** From when on a coat is credited: its clock's start where a reading still held then, else the first reading after it. */
export function creditedFrom(coat: Pick<CoatForClock, 'clockStartsAt'>, now: Instant, readings: WindowReadings): Instant {
  if (heldAtStart(coat, readings)) return coat.clockStartsAt
  return readings.firstInWindowAt ?? Math.max(now, coat.clockStartsAt)
}

function evidenceOf(coat: CoatForClock, readings: WindowReadings) {
  const heldSource = heldAtStart(coat, readings) ? readings.lastBeforeStart?.source : undefined
  const typed = readings.typedCount + (heldSource === 'typed' ? 1 : 0)
  const sensor = readings.sensorCount + (heldSource === 'sensor' ? 1 : 0)
  return { hasTyped: typed > 0, needsConfirmation: typed === 1 && sensor === 0, hasUsable: typed + sensor > 0 }
}

const shift = (at: Instant | null, byMs: number): Instant | null => (at === null ? null : at + byMs)

const isReached = (at: Instant | null, now: Instant): boolean => at !== null && at <= now
