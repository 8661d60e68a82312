import { TZDate } from '@date-fns/tz'
import { millisecondsInDay } from 'date-fns/constants'
import { assertWithin } from '@/lib/drying/guards'
import type { FanHours, FanOverride, FanSwitch, Instant } from '@/lib/drying/types'

export type Stretch = { from: Instant; to: Instant }

/** The timetable of a place over a stretch of time. `to` may be Infinity. */
export type TimetableStretch = Stretch & { fanHours: readonly FanHours[] }

/** A timetable repeats each week, so what does not happen in this time does not happen at all; a day more for a change of the clocks. */
const A_WEEK_MS = 8 * millisecondsInDay

/**
 * When a timetable has the fans on within [from, to): in order, apart from each other, cut to it.
 *
 * Units: instants in epoch ms; the timetable is read as wall-clock time in the IANA zone, on the days of a clock change too.
 *
 * @throws {RangeError} if a zone is unknown, or a row does not run from 0 to 1440 minutes, off after on.
 */
export function fansOnWithin(from: Instant, to: Instant, fanHours: readonly FanHours[], timeZone: string): Stretch[] {
  for (const { weekday, onMinute, offMinute } of fanHours) {
    assertWithin('Weekday', weekday, 1, 7)
    assertWithin('Minute of fans on', onMinute, 0, 1439)
    assertWithin('Minute of fans off', offMinute, onMinute + 1, 1440)
  }
  const local = new TZDate(from, timeZone)
  if (Number.isNaN(local.getTime())) throw new RangeError(`Unknown time zone ${JSON.stringify(timeZone)}.`)
  if (fanHours.length === 0) return []
  const atMinute = (day: number, minute: number): Instant =>
    new TZDate(local.getFullYear(), local.getMonth(), local.getDate() + day, 0, minute, 0, 0, timeZone).getTime()
  const stretches: Stretch[] = []
  for (let day = 0; atMinute(day, 0) < to; day += 1) {
    const weekday = new TZDate(atMinute(day, 0), timeZone).getDay() || 7
    for (const row of fanHours) {
      if (row.weekday === weekday) stretches.push({ from: atMinute(day, row.onMinute), to: atMinute(day, row.offMinute) })
    }
  }
  return joined(stretches, from, to)
}

function joined(stretches: readonly Stretch[], from: Instant, to: Instant): Stretch[] {
  const joint: Stretch[] = []
  for (const stretch of stretches.toSorted((a, b) => a.from - b.from)) {
    const cut = { from: Math.max(stretch.from, from), to: Math.min(stretch.to, to) }
    const last = joint.at(-1)
    if (cut.to <= cut.from) continue
    if (last && cut.from <= last.to) last.to = Math.max(last.to, cut.to)
    else joint.push(cut)
  }
  return joint
}

/** Whether the timetable of that moment has the fans on. */
export function isOnByTimetable(timetables: readonly TimetableStretch[], at: Instant, timeZone: string): boolean {
  const timetable = timetables.find(({ from, to }) => from <= at && at < to)
  return timetable !== undefined && fansOnWithin(at, at + 1, timetable.fanHours, timeZone).length > 0
}

/**
 * The first moment after `at` at which the timetable switches the fans, a change of the timetable itself among them; null where it never does.
 *
 * Costs by the timetables that the place has had since, not by the time.
 */
export function nextTimetableSwitch(timetables: readonly TimetableStretch[], at: Instant, timeZone: string): Instant | null {
  let isOn = isOnByTimetable(timetables, at, timeZone)
  for (const { from, to, fanHours } of timetables) {
    if (to <= at) continue
    const start = Math.max(from, at)
    const end = Math.min(to, start + A_WEEK_MS)
    const on = fansOnWithin(start, end, fanHours, timeZone)
    const isOnAtStart = on[0]?.from === start
    if (isOnAtStart !== isOn && start > at) return start
    isOn = isOnAtStart
    const edge = isOn ? on[0]?.to : on[0]?.from
    if (edge !== undefined && edge < end) return edge
  }
  return null
}

/**
 * Stretches in which a person's word on the fans stands: from the touch to the timetable's own next switch, or to the next touch.
 *
 * @param switches in the order in which they were said; of two at one moment the later one counts.
 * @param timetables in order and touching, from the first switch or before it.
 * @source our own rule: who switches the fans by hand means this stretch of the day, and the timer has them again after it.
 */
export function fanOverrides(switches: readonly FanSwitch[], timetables: readonly TimetableStretch[], timeZone: string): FanOverride[] {
  return switches.flatMap(({ at, state }, index): FanOverride[] => {
    if (state === 'timetable') return []
    const nextSaidAt = switches[index + 1]?.at ?? Infinity
    if (nextSaidAt <= at) return []
    const to = Math.min(nextSaidAt, nextTimetableSwitch(timetables, at, timeZone) ?? Infinity)
    return [{ from: at, to, isOn: state === 'on' }]
  })
}
