import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { TZDate } from '@date-fns/tz'
import { CAST } from '@/lib/demo/cast'
import type { DemoClimate } from '@/lib/demo/climate'
import { dryingRoom } from '@/lib/demo/drying-room'
import { demandOf, recipeOf } from '@/lib/demo/plan-coats'
import { planTree, type PlannedTree } from '@/lib/demo/plan-trees'
import { seededRandom } from '@/lib/demo/random'
import { DEMO_CALENDAR, type DemoSetting } from '@/lib/demo/shop'
import { workHours, type WorkHours } from '@/lib/demo/work-hours'
import { localDay } from '@/lib/format/local-time'
import { pourDeadline } from '@/lib/schedule/shifts'

const DEMO_SEED = 20
/** Two weeks of readings before the start, and half a day so that the first dips have air around them. */
export const DEMO_HISTORY_MS = 14.5 * millisecondsInDay

export type TaggedTree = PlannedTree & { tag: string; pourDate: string | null }

export type DemoPlan = { now: number; startsAt: number; climate: DemoClimate; hours: WorkHours; trees: TaggedTree[] }

/** The climate of a demo, by when its history begins and by the zone that it lies in. */
export const demoClimate = (startsAt: number, timeZone: string): DemoClimate => ({ seed: DEMO_SEED, startsAt, timeZone })

/**
 * Plans the whole past of the demo for a start at `now`. Pure: the same start and setting give the same past.
 *
 * @throws {Error} when the working hours of the setting leave no room for it.
 */
export function planDemo(now: number, setting: DemoSetting): DemoPlan {
  const startsAt = now - DEMO_HISTORY_MS
  const climate = demoClimate(startsAt, setting.timeZone)
  const hours = workHours(startsAt, now, setting)
  const parts = { room: dryingRoom(climate, { from: startsAt, now, altitudeM: setting.altitudeM }), hours, climate, startsAt, now }
  const planned = CAST.map((tree, index) => planTree(tree, { ...parts, random: seededRandom(DEMO_SEED + index) }))
  const trees = planned
    .toSorted((a, b) => a.createdAt - b.createdAt)
    .map((tree, index) => ({ ...tree, tag: `T-${FIRST_TAG + index}`, pourDate: pourDateOf(tree, now, setting) }))
  return { now, startsAt, climate, hours, trees }
}

/**
 * The same for any foundry: where its hours are so short that two weeks of work do not fit into them, the demo keeps its own.
 *
 * @example planDemoAnyhow(now, { ...setting, calendar: oneMorningAWeek }).isInOwnHours // => false
 */
export function planDemoAnyhow(now: number, setting: DemoSetting): { plan: DemoPlan; isInOwnHours: boolean } {
  try {
    return { plan: planDemo(now, setting), isInOwnHours: true }
  } catch {
    return { plan: planDemo(now, { ...setting, calendar: DEMO_CALENDAR }), isInOwnHours: false }
  }
}

const FIRST_TAG = 412
/** Wednesdays and Fridays. */
const POUR_WEEKDAYS = [3, 5]

/** A cautious day's drying, weekends and nights taken in, and the wait for somebody to dip. */
const REFERENCE_HOURS_A_DAY = 7
const WAIT_DAYS = 0.35

/** The first pour day that leaves room for what is still to do. */
function pourDateOf(planned: PlannedTree, now: number, setting: DemoSetting): string | null {
  const { tree, coats, leftAt } = planned
  if (tree.pour === undefined) return null
  if (tree.pour === 'will miss') return firstPourDay(now + 20 * millisecondsInHour, setting)
  if (leftAt !== null) return firstPourDay(leftAt + 12 * millisecondsInHour, setting)
  const toCome = recipeOf(tree).slice(Math.max(0, coats.length - 1))
  const referenceHours = toCome.reduce((sum, { number }) => sum + demandOf(planned, number).amount, 0)
  const days = 2 + referenceHours / REFERENCE_HOURS_A_DAY + WAIT_DAYS * toCome.length
  return firstPourDay(now + days * millisecondsInDay, setting)
}

function firstPourDay(from: number, { timeZone, calendar }: DemoSetting): string {
  for (let at = from; ; at += millisecondsInDay) {
    const day = localDay(at, timeZone)
    const weekday = new TZDate(at, timeZone).getDay()
    if (POUR_WEEKDAYS.includes(weekday) && pourDeadline(day, calendar, timeZone) > from - millisecondsInMinute) return day
  }
}
