import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import type { CoatingWay, RecessClass, Spacing, Stucco } from '@/lib/coats/vocabulary'
import type { CastTree } from '@/lib/demo/cast'
import type { DryingRoom } from '@/lib/demo/drying-room'
import { pick, type Random } from '@/lib/demo/random'
import { DEMO_RECIPES, type DemoBath, type DemoPlace, type DemoRecipeCoat } from '@/lib/demo/shop'
import { drawTruth, WAITED_SHARE } from '@/lib/demo/truth'
import { lastRunSlot, shiftAt, type WorkHours } from '@/lib/demo/work-hours'
import { guardFor, needBand, needReferenceHours, sigma } from '@/lib/drying/need'
import type { Dose } from '@/lib/drying/types'

export type PlannedCoat = {
  number: number
  bath: DemoBath
  stucco: Stucco
  way: CoatingWay
  place: DemoPlace
  dippedAt: number
  drainSeconds: number
  roughMinutes: number
  reason: string | null
  /** What it really needs against its starting value, where people check it; null where they do not. */
  truth: number | null
}

/** What of a tree bears on its drying. */
export type Shape = {
  tree: CastTree
  recessClass: RecessClass
  spacing: Spacing
  /** People weigh and feel its coats, and dip over them once they are dry. */
  isChecked?: boolean
}

/** What a coat asks of the room until the next one may go on. */
export type Demand = { coat: DemoRecipeCoat; stucco: Stucco; need: Dose; spread: number; amount: number; bound: 'likely' | 'low' }

export const recipeOf = (tree: CastTree): readonly DemoRecipeCoat[] => DEMO_RECIPES[tree.recipe].coats

/** More than ever is left below a coat that was dipped early, so that the one above it is planned long enough. */
const MOISTURE_BELOW_EARLY = 0.25

/** The need of a coat and the dose at its guard, as the commands will work them out. */
export function demandOf({ tree, recessClass, spacing }: Shape, number: number): Demand {
  const coat = recipeOf(tree)[number - 1]
  if (!coat) throw new RangeError(`The recipe has no coat ${number}.`)
  const { story } = tree
  const stucco = story?.kind === 'other stucco' && story.coat === number ? 'coarse' : coat.stucco
  const hours = needReferenceHours({
    recipeReferenceHours: coat.needReferenceHours,
    recipeStucco: coat.stucco,
    usedStucco: stucco,
    spacing,
    recessClass,
    moistureRatioBelow: story?.kind === 'dipped early' && story.overCoat === number - 1 ? MOISTURE_BELOW_EARLY : 0,
    treeTheta: 0,
  })
  const spread = sigma({ recessClass, hasTyped: false })
  const need = needBand(hours, spread)
  const isLast = number === recipeOf(tree).length
  const isSafe = guardFor({ kind: coat.kind, isLast, recessClass, recipeGuard: coat.guard }) === 'safe'
  return { coat, stucco, need, spread, amount: isSafe ? need.high : need.likely, bound: isSafe ? 'low' : 'likely' }
}

/** The dose at a coat's guard in the air of a time: damp air asks for more before it is safe. */
export function amountIn(room: DryingRoom, place: DemoPlace, { need, spread, amount, bound }: Demand, from: number, to: number): number {
  return bound === 'likely' ? amount : Math.max(amount, needBand(need.likely, Math.hypot(spread, room.airSigma(place, from, to))).high)
}

/** When a coat comes to its guard; null when that lies beyond what is known of the room. */
export function guardAt(room: DryingRoom, place: DemoPlace, dippedAt: number, demand: Demand): number | null {
  const from = dippedAt + demand.coat.drainSeconds * 1000
  let { amount } = demand
  let at = room.whenDose(place, from, amount, demand.bound)
  // The air until then says how much is needed, which says until when: it settles at once.
  for (let round = 0; round < 3 && at !== null; round += 1) {
    amount = amountIn(room, place, demand, from, at)
    at = room.whenDose(place, from, amount, demand.bound)
  }
  return at
}

/** The newest whole second at which a coat can be dipped so that its guard falls at `at` or before. */
export function latestDipFor(room: DryingRoom, place: DemoPlace, at: number, demand: Demand, from: number): number | null {
  const isInTime = (dippedAt: number) => {
    const start = dippedAt + demand.coat.drainSeconds * 1000
    return room.doseBetween(place, start, at)[demand.bound] >= amountIn(room, place, demand, start, at)
  }
  if (!isInTime(from)) return null
  let [early, late] = [from, at]
  while (late - early > 500) {
    const middle = (early + late) / 2
    if (isInTime(middle)) early = middle
    else late = middle
  }
  return Math.floor(early / 1000) * 1000
}

export const wayOf = (tree: CastTree, coat: DemoRecipeCoat): CoatingWay => (coat.kind === 'core fill' ? 'poured' : (tree.way ?? 'dip'))

export type PlanParts = { room: DryingRoom; hours: WorkHours; random: Random; startsAt: number }

/** A fast place for everything, for trees that would not fit into the history otherwise. */
type Pace = 'usual' | 'fast'

/**
 * Plans the coats from `newest` down to the first, each dipped in the newest run that lets it reach its guard before the next
 * one is due at `nextAt`.
 *
 * @returns coats in order, or null when they do not fit into the history.
 */
export function planCoatsBefore(shape: Shape, newest: number, nextAt: number, parts: PlanParts, pace: Pace): PlannedCoat[] | null {
  const coats: PlannedCoat[] = []
  let dueAt = nextAt
  for (let number = newest; number >= 1; number -= 1) {
    const coat = planCoatBefore(shape, number, dueAt, parts, pace)
    if (!coat) return null
    coats.unshift(coat)
    dueAt = coat.dippedAt
  }
  return coats
}

function planCoatBefore(shape: Shape, number: number, dueAt: number, parts: PlanParts, pace: Pace): PlannedCoat | null {
  const { room, hours, random, startsAt } = parts
  const { tree } = shape
  const asPlanned = demandOf(shape, number)
  const { coat, stucco } = asPlanned
  const isEarly = tree.story?.kind === 'dipped early' && tree.story.overCoat === number
  const truth = shape.isChecked && !isEarly ? drawTruth(coat.kind, random) : null
  const demand: Demand = {
    ...asPlanned,
    amount: Math.max(asPlanned.amount, asPlanned.need.likely * (truth ?? 0) * WAITED_SHARE),
  }
  const place = usualPlace(coat, random, pace)
  const way = wayOf(tree, coat)
  const delayMs = (4 + 36 * random() * random()) * millisecondsInMinute
  const earliest = startsAt + 3 * millisecondsInHour
  const kind = { bath: coat.bath, stucco, way }
  const bound = latestDipFor(room, place, dueAt - delayMs, demand, earliest)
  const inShift = bound === null ? null : lastRunSlot(hours, bound, kind)
  // A face coat does not hang over a Sunday: somebody comes in for it.
  const isTooLong = inShift !== null && coat.kind === 'face' && dueAt - inShift > coat.longestWaitHours * millisecondsInHour
  const inTime = bound !== null && isTooLong ? lastRunSlot(hours, bound, kind, 'extra too') : inShift
  const tooLate = isEarly ? earlyDip(dueAt, demand, kind, parts) : null
  const halfDry = truth !== null && coat.kind === 'backup' ? 0.5 * truth * asPlanned.need.likely : null
  const watched = inTime === null || halfDry === null ? null : whileWatched(inTime, { place, coat, halfDry, kind }, parts)
  const dippedAt = tooLate?.dippedAt ?? watched ?? inTime
  if (dippedAt === null || dippedAt < earliest) return null
  return {
    number,
    bath: coat.bath,
    stucco,
    way,
    place: tooLate?.place ?? place,
    dippedAt,
    drainSeconds: coat.drainSeconds,
    roughMinutes: tree.story?.kind === 'rough time' && tree.story.coat === number ? 5 : 0,
    reason: reasonFor(tree, number),
    truth,
  }
}

/** A run up to half a day earlier after which the coat is half dry while people are there to weigh it; null where there is none. */
function whileWatched(
  newest: number,
  { place, coat, halfDry, kind }: { place: DemoPlace; coat: DemoRecipeCoat; halfDry: number; kind: Parameters<typeof lastRunSlot>[2] },
  { room, hours }: PlanParts,
): number | null {
  let dippedAt: number | null = newest
  while (dippedAt !== null && newest - dippedAt < 12 * millisecondsInHour) {
    const half = room.whenDose(place, dippedAt + coat.drainSeconds * 1000, halfDry, 'likely')
    if (half !== null && shiftAt(hours, half)) return dippedAt
    dippedAt = lastRunSlot(hours, dippedAt - 1, kind)
  }
  return null
}

/** A coat's own reason, for what the run of it did unlike the recipe. */
export function reasonFor({ story }: CastTree, number: number): string | null {
  if (story?.kind === 'other stucco' && story.coat === number) return story.reason
  if (story?.kind === 'dipped early' && story.overCoat === number - 1) return story.reason
  return null
}

/** A dip so late that the next one comes while an eighth to a quarter of the water is left; null where no run falls so. */
function earlyDip(
  dueAt: number,
  { coat, need }: Demand,
  kind: { bath: DemoBath; stucco: Stucco; way: CoatingWay },
  { room, hours }: PlanParts,
): { place: DemoPlace; dippedAt: number } | null {
  for (const place of ['fanRack', 'longRack', 'netLoft', 'stillCorner'] as const) {
    let dippedAt = lastRunSlot(hours, dueAt - millisecondsInHour, kind)
    while (dippedAt !== null && dueAt - dippedAt < 40 * millisecondsInHour) {
      const share = room.doseBetween(place, dippedAt + coat.drainSeconds * 1000, dueAt).likely / need.likely
      if (share > 0.95) break
      if (share > 0.66) return { place, dippedAt }
      dippedAt = lastRunSlot(hours, dippedAt - 1, kind)
    }
  }
  return null
}

function usualPlace(coat: DemoRecipeCoat, random: Random, pace: Pace): DemoPlace {
  if (pace === 'fast') return 'fanRack'
  // Face coats want calmer air.
  if (coat.kind === 'face') return pick(['longRack', 'longRack', 'netLoft'], random)
  return pick(['fanRack', 'fanRack', 'longRack', 'netLoft'], random)
}
