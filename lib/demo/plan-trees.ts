import { millisecondsInDay, millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { RECESS_CLASSES, SPACINGS } from '@/lib/coats/vocabulary'
import type { Aim, CastTree } from '@/lib/demo/cast'
import { planChecks, type PlannedCheck } from '@/lib/demo/checks'
import type { DemoClimate } from '@/lib/demo/climate'
import {
  amountIn,
  demandOf,
  guardAt,
  latestDipFor,
  planCoatsBefore,
  reasonFor,
  recipeOf,
  wayOf,
  type Demand,
  type PlanParts,
  type PlannedCoat,
  type Shape,
} from '@/lib/demo/plan-coats'
import type { DemoPlace } from '@/lib/demo/shop'
import { lastAtWork, oddness, shiftAt } from '@/lib/demo/work-hours'
import { moistureRatio } from '@/lib/drying/moisture'

/** A tree with everything that happened to it, but for its tag and its pour date. */
export type PlannedTree = Shape & {
  createdAt: number
  /** Null while intake is open. */
  intakeAt: number | null
  coats: readonly PlannedCoat[]
  /** What people weighed, felt and measured on them. */
  checks: readonly PlannedCheck[]
  lookOverAt: number | null
  leftAt: number | null
}

type Parts = PlanParts & { now: number; climate: DemoClimate }

const MINUTE = millisecondsInMinute
const HOUR = millisecondsInHour

/**
 * Plans one tree so that the drying clock brings it to its aim at the start.
 *
 * @throws {Error} when the history is too short for it; the tests run the planning from every kind of hour.
 */
export function planTree(tree: CastTree, parts: Parts): PlannedTree {
  const { aim } = tree
  if (aim.kind === 'bare wax' || aim.kind === 'wax ready') return planWax(tree, parts)
  const plan = aim.kind === 'released' || aim.kind === 'scrapped' ? planGone(tree, aim, parts) : planOnFloor(tree, parts)
  if (!plan) throw new Error(`The demo's history is too short for ${tree.pieces[0]?.workTitle ?? 'a tree'} (${aim.kind}).`)
  return { ...plan, ...arrival(plan.coats[0]?.dippedAt ?? parts.now, parts) }
}

type WithCoats = Omit<PlannedTree, 'createdAt' | 'intakeAt'>

const shapesOf = (tree: CastTree): Shape[] =>
  RECESS_CLASSES.filter((recess) => (tree.recesses ?? ['none']).includes(recess)).flatMap((recessClass) =>
    SPACINGS.filter((spacing) => (tree.spacings ?? ['open']).includes(spacing)).map((spacing) => ({ tree, recessClass, spacing })),
  )

/** An instant with people at work, some time before another one. */
function workBefore(at: number, [fewest, most]: readonly [number, number], { hours, random, startsAt }: PlanParts): number {
  const wanted = at - fewest - random() * (most - fewest)
  const atWork = lastAtWork(hours, wanted, 10 * MINUTE) ?? startsAt
  // Not all at closing time.
  const found = atWork < wanted ? atWork - random() * 100 * MINUTE : atWork
  return Math.floor(Math.max(startsAt, found) / 1000) * 1000
}

/** When a tree came in and passed its intake, for a first dip at some instant. */
function arrival(firstDipAt: number, parts: PlanParts): { createdAt: number; intakeAt: number } {
  const intakeAt = workBefore(firstDipAt, [20 * MINUTE, 5 * HOUR], parts)
  return { intakeAt, createdAt: workBefore(intakeAt, [2 * HOUR, 20 * HOUR], parts) }
}

function planWax(tree: CastTree, parts: Parts): PlannedTree {
  const shape: Shape = { tree, recessClass: tree.recesses?.[0] ?? 'none', spacing: tree.spacings?.[0] ?? 'open' }
  const { intakeAt, createdAt } = arrival(parts.now, parts)
  return {
    ...shape,
    createdAt,
    intakeAt: tree.aim.kind === 'wax ready' ? intakeAt : null,
    coats: [],
    checks: [],
    lookOverAt: null,
    leftAt: null,
  }
}

function planGone(tree: CastTree, aim: Aim & { daysAgo: number }, parts: Parts): WithCoats | null {
  const leftAt = workBefore(parts.now - aim.daysAgo * millisecondsInDay, [0, 2 * HOUR], parts)
  const isReleased = aim.kind === 'released'
  const lookOverAt = isReleased ? workBefore(leftAt, [15 * MINUTE, 90 * MINUTE], parts) : null
  const newest = isReleased ? recipeOf(tree).length : (tree.coatsOn?.[1] ?? 1)
  let second: WithCoats | null = null
  const end = lookOverAt ?? leftAt
  // A shop that is open so seldom that the true needs leave no room has nobody to check them either.
  for (const isChecked of isReleased ? [true, false] : [false]) {
    for (const shape of shapesOf(tree).flatMap(withEarlyCoats)) {
      for (const pace of ['usual', 'fast'] as const) {
        const coats = planCoatsBefore({ ...shape, isChecked }, newest, end, parts, pace)
        if (!coats) continue
        const checks = isChecked ? planChecks(shape, coats, end, parts) : []
        const plan = { ...shape, coats, checks, lookOverAt, leftAt }
        if (hasItsEarlyDip(plan, parts)) return plan
        second ??= plan
      }
    }
  }
  return second
}

/** A tree that is once dipped early may be so over any of its middle coats: not every day has a run at the right hour. */
function withEarlyCoats(shape: Shape): Shape[] {
  const { tree } = shape
  const { story } = tree
  if (story?.kind !== 'dipped early') return [shape]
  return EARLY_COATS.map((overCoat) => ({ ...shape, tree: { ...tree, story: { ...story, overCoat } } }))
}

// Again and again, with other delays and places each time.
const EARLY_COATS = [4, 3, 5, 4, 3, 5, 4, 3, 5, 4, 3, 5]

function hasItsEarlyDip({ coats, ...shape }: WithCoats, { room }: Parts): boolean {
  const { story } = shape.tree
  if (story?.kind !== 'dipped early') return true
  if (story.overCoat === undefined) return false
  const [below, above] = [coats[story.overCoat - 1], coats[story.overCoat]]
  if (!below || !above) return false
  const dose = room.doseBetween(below.place, below.dippedAt + below.drainSeconds * 1000, above.dippedAt)
  return dose.likely < 0.96 * demandOf(shape, below.number).need.likely
}

type Candidate = { shape: Shape; number: number; place: DemoPlace; dippedAt: number; cost: number }

/** Tries newest dips from the least odd to the oddest until one has room for the coats before it. */
function planOnFloor(tree: CastTree, parts: Parts): WithCoats | null {
  const lookOverAt = tree.aim.kind === 'looked over' ? workBefore(parts.now, [12 * MINUTE, 2 * HOUR], parts) : null
  const candidates = newestDips(tree, lookOverAt, parts)
  for (const { shape, number, place, dippedAt } of candidates.toSorted((a, b) => a.cost - b.cost)) {
    const { coat, stucco } = demandOf(shape, number)
    for (const pace of ['usual', 'fast'] as const) {
      const before = planCoatsBefore(shape, number - 1, dippedAt, parts, pace)
      if (!before) continue
      const newest: PlannedCoat = {
        number,
        bath: coat.bath,
        stucco,
        way: wayOf(tree, coat),
        place,
        dippedAt,
        drainSeconds: coat.drainSeconds,
        roughMinutes: 0,
        reason: reasonFor(tree, number),
        truth: null,
      }
      return { ...shape, coats: [...before, newest], checks: [], lookOverAt, leftAt: null }
    }
  }
  return null
}

const PLACES_WITH_A_SENSOR = ['fanRack', 'longRack', 'netLoft', 'stillCorner'] as const satisfies readonly DemoPlace[]
const SCAN_EVERY_MS = 23 * MINUTE
const SCAN_HOURS = 100

/** Every dip of a newest coat that brings the tree to its aim, with what speaks against it. */
function newestDips(tree: CastTree, lookOverAt: number | null, parts: Parts): Candidate[] {
  const { now, hours, random, room, startsAt } = parts
  const { aim } = tree
  const coatCount = recipeOf(tree).length
  const isFinished = ['last coat on', 'dried out', 'looked over'].includes(aim.kind)
  const [fewest, most] = isFinished ? [coatCount, coatCount] : (tree.coatsOn ?? [1, coatCount - 1])
  const candidates: Candidate[] = []
  const places: readonly DemoPlace[] = aim.kind === 'unknown' ? ['boatShed'] : PLACES_WITH_A_SENSOR
  for (const place of places) {
    const calm = place === 'stillCorner' ? 3 : 0
    const scanned =
      aim.kind === 'guard'
        ? []
        : scanDips(now - random() * SCAN_EVERY_MS).map((dippedAt) => ({ dippedAt, oddness: oddness(hours, dippedAt) }))
    for (const shape of shapesOf(tree)) {
      for (let number = fewest; number <= most; number += 1) {
        const demand = demandOf(shape, number)
        const add = (dippedAt: number, odd: number, extra: number) =>
          candidates.push({ shape, number, place, dippedAt, cost: 10 * odd + calm + extra + 4 * random() })
        if (aim.kind === 'guard') {
          const at = now + aim.minutes * MINUTE
          const dippedAt = latestDipFor(room, place, at, demand, startsAt)
          if (dippedAt === null || !isWithinWait(dippedAt, demand, now)) continue
          // Only where the clock runs: at a standstill the newest dip in time may come to its guard much earlier.
          const reachedAt = guardAt(room, place, dippedAt, demand)
          if (reachedAt !== null && at - reachedAt < MINUTE / 4) add(dippedAt, oddness(hours, dippedAt), 0)
          continue
        }
        for (const { dippedAt, oddness: odd } of scanned) {
          const cost = costOf(aim, { demand, place, dippedAt, odd, lookOverAt }, parts)
          if (cost !== null) add(dippedAt, odd, cost)
        }
      }
    }
  }
  return candidates
}

const scanDips = (newest: number): number[] =>
  Array.from(
    { length: Math.floor((SCAN_HOURS * HOUR) / SCAN_EVERY_MS) },
    (_, step) => Math.floor((newest - step * SCAN_EVERY_MS) / 1000) * 1000,
  )

/** Leaves an hour and more before a coat counts as overdue, so that the picture of the first start stands for a while. */
function isWithinWait(dippedAt: number, { coat }: Demand, now: number): boolean {
  return now - dippedAt < (coat.longestWaitHours - 1.5) * HOUR
}

type Question = { demand: Demand; place: DemoPlace; dippedAt: number; odd: number; lookOverAt: number | null }

/** What speaks against a dip that serves the aim; null when it does not serve it. */
function costOf(aim: Aim, { demand, place, dippedAt, odd, lookOverAt }: Question, { room, now, hours }: Parts): number | null {
  const { need, bound, coat } = demand
  const from = dippedAt + coat.drainSeconds * 1000
  const ageHours = (now - dippedAt) / HOUR
  if (aim.kind === 'unknown') return odd === 0 && ageHours > 12.6 ? ageHours : null
  const doseTo = (at: number) => room.doseBetween(place, from, at)
  const hasGuardBy = (at: number) => doseTo(at)[bound] >= amountIn(room, place, demand, from, at)
  const ratio = moistureRatio(doseTo(now).likely, need.likely, coat.moistureTarget)
  switch (aim.kind) {
    case 'wet':
      return from < now - MINUTE && ratio > 0.56 && ratio < 0.97 ? 0 : null
    case 'drying':
      return ratio < 0.45 && doseTo(now + 40 * MINUTE).likely < 0.96 * need.likely ? 0 : null
    case 'held':
      return ratio < 0.9 && isWithinWait(dippedAt, demand, now) ? Math.abs(ratio - 0.4) : null
    case 'waiting':
      return hasGuardBy(now - 20 * MINUTE) && isWithinWait(dippedAt, demand, now) ? 0.2 * ageHours : null
    case 'overdue':
      return hasGuardBy(now - HOUR) && ageHours > coat.longestWaitHours + 0.3 ? 0.5 * ageHours : null
    case 'last coat on':
      return doseTo(now).low < 0.93 * amountIn(room, place, demand, from, now) && from < now - HOUR ? Math.abs(ratio - 0.3) : null
    case 'dried out':
      return hasGuardBy(now - 20 * MINUTE) ? 0.2 * ageHours : null
    case 'looked over':
      return lookOverAt !== null && shiftAt(hours, lookOverAt) && hasGuardBy(lookOverAt - 5 * MINUTE) ? 0.2 * ageHours : null
    case 'bare wax':
    case 'wax ready':
    case 'guard':
    case 'released':
    case 'scrapped':
      return null
  }
}
