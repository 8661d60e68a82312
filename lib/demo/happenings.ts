import { millisecondsInDay, millisecondsInHour, millisecondsInMinute, millisecondsInSecond } from 'date-fns/constants'
import { COATING_WAYS, STUCCOS } from '@/lib/coats/vocabulary'
import type { TakenEvidence } from '@/lib/demo/checks'
import type { PlannedCoat } from '@/lib/demo/plan-coats'
import type { DemoPlan, TaggedTree } from '@/lib/demo/plan'
import type { DemoPersonKey } from '@/lib/demo/people'
import { unitOf } from '@/lib/demo/random'
import { lastAtWork, shiftAt } from '@/lib/demo/work-hours'
import { slowestSpot } from '@/lib/trees/coat-evidence'
import type { Air } from '@/lib/drying/types'

type Of<Kind extends string, Detail> = { at: number; kind: Kind; by: DemoPersonKey } & Detail

/** One thing that somebody did and noted down, in the foundry's past. */
export type Happening =
  | Of<'tree added' | 'intake' | 'intake begun' | 'look-over' | 'release', { tree: TaggedTree }>
  | Of<'run', { dips: { tree: TaggedTree; coat: PlannedCoat }[]; room?: Air }>
  | Of<'evidence', { tree: TaggedTree; coatNumber: number; evidence: TakenEvidence }>
  | Of<'evidence withdrawn', { tree: TaggedTree }>
  | Of<'hold' | 'lift' | 'scrap', { tree: TaggedTree; reason: string }>
  | Of<'stir', { bath: 'face' | 'backup' }>
  | Of<'reading', { room: Air }>

const SECOND = millisecondsInSecond
const MINUTE = millisecondsInMinute
const OPERATORS = ['maud', 'halvard', 'oona'] as const
const SUPERVISOR = 'ines'

/** Who of the operators did something at an instant. */
const operatorAt = (at: number, salt: number) => OPERATORS[Math.floor(unitOf(at, salt) * OPERATORS.length)] ?? 'maud'

/** Everything that happened in a planned past, in order of time. */
export function happenings(plan: DemoPlan): Happening[] {
  const all: Happening[] = [...plan.trees.flatMap((tree) => ofTree(tree, plan)), ...runs(plan), ...mornings(plan)]
  return all.filter(({ at }) => at <= plan.now).toSorted((a, b) => a.at - b.at)
}

function ofTree(tree: TaggedTree, { now, hours }: DemoPlan): Happening[] {
  const { aim, story } = tree.tree
  const list: Happening[] = [{ at: tree.createdAt, kind: 'tree added', by: SUPERVISOR, tree }]
  if (tree.intakeAt !== null) list.push({ at: tree.intakeAt, kind: 'intake', by: SUPERVISOR, tree })
  else list.push({ at: tree.createdAt + 2 * MINUTE, kind: 'intake begun', by: SUPERVISOR, tree })
  if (tree.lookOverAt !== null) list.push({ at: tree.lookOverAt, kind: 'look-over', by: SUPERVISOR, tree })
  if (aim.kind === 'released' && tree.leftAt !== null) list.push({ at: tree.leftAt, kind: 'release', by: SUPERVISOR, tree })
  if (aim.kind === 'scrapped' && tree.leftAt !== null) {
    list.push({ at: tree.leftAt, kind: 'scrap', by: SUPERVISOR, tree, reason: aim.reason })
  }
  if (aim.kind === 'held') {
    const dippedAt = tree.coats.at(-1)?.dippedAt ?? now
    const at = Math.max(lastAtWork(hours, now - 25 * MINUTE, MINUTE) ?? 0, Math.min(now - MINUTE, dippedAt + 10 * MINUTE))
    list.push({ at, kind: 'hold', by: operatorAt(at, 1), tree, reason: aim.reason })
  }
  for (const { at, coatNumber, evidence, isMistake } of tree.checks) {
    const by = operatorAt(at, 2)
    list.push({ at, kind: 'evidence', by, tree, coatNumber, evidence })
    if (isMistake) list.push({ at: at + 2 * MINUTE, kind: 'evidence withdrawn', by, tree })
  }
  if (story?.kind === 'held overnight') {
    const [from, to] = longestWait(tree)
    const at = shiftAt(hours, from + 40 * MINUTE) ? from + 40 * MINUTE : from + 3 * MINUTE
    list.push({ at, kind: 'hold', by: operatorAt(at, 1), tree, reason: story.reason })
    list.push({ at: to - 6 * MINUTE, kind: 'lift', by: SUPERVISOR, tree, reason: story.lifted })
  }
  if (story?.kind === 'felt') {
    const [from, to] = longestWait(tree)
    // To the second: an instant is stored as a whole number.
    const third = Math.floor((to - from) / 3 / SECOND) * SECOND
    const at = story.verdict === 'dry' ? to - 4 * MINUTE : (lastAtWork(hours, from + third, MINUTE) ?? from)
    const coatNumber = tree.coats.find((coat) => coat.dippedAt === from)?.number ?? 1
    const evidence = { kind: 'touch' as const, spot: slowestSpot(tree.recessClass), verdict: story.verdict }
    if (at > from + 10 * MINUTE) list.push({ at, kind: 'evidence', by: operatorAt(at, 2), tree, coatNumber, evidence })
  }
  return list
}

/** The longest time between two dips of a tree. */
function longestWait({ coats }: TaggedTree): [from: number, to: number] {
  const waits = coats.slice(1).map((coat, index): [number, number] => [coats[index]?.dippedAt ?? coat.dippedAt, coat.dippedAt])
  return waits.toSorted((a, b) => b[1] - b[0] - (a[1] - a[0]))[0] ?? [0, 0]
}

/** Dips of one kind at one moment are one run, as at the bath. */
function runs({ trees, now }: DemoPlan): Happening[] {
  const byRun = new Map<string, { tree: TaggedTree; coat: PlannedCoat }[]>()
  for (const tree of trees) {
    for (const coat of tree.coats) {
      const kind = [coat.bath, STUCCOS.indexOf(coat.stucco), COATING_WAYS.indexOf(coat.way), coat.drainSeconds, coat.roughMinutes]
      const key = [coat.dippedAt, ...kind].join(' ')
      byRun.set(key, [...(byRun.get(key) ?? []), { tree, coat }])
    }
  }
  return [...byRun.values()].map((dips): Happening => {
    const dippedAt = dips[0]?.coat.dippedAt ?? now
    // Logged when the last tree of the run hangs again.
    const at = Math.min(now, dippedAt + Math.round((20 + 60 * unitOf(dippedAt, 3)) * 1000))
    const isInShed = dips.some(({ coat }) => coat.place === 'boatShed')
    return { at, kind: 'run', by: operatorAt(dippedAt, 0), dips, ...(isInShed ? { room: shedAir(dippedAt) } : {}) }
  })
}

/** What people read off the wall of the boat shed: cool and damp, to half a degree and a whole percent. */
const shedAir = (at: number): Air => ({
  airTempC: 16 + Math.round(3 * unitOf(at, 5)) / 2,
  relHumidityPct: 68 + Math.floor(6 * unitOf(at, 6)),
})

/** Each morning the baths are stirred, and now and then somebody reads the shed's hygrometer, until a tree hangs there. */
function mornings({ hours, trees }: DemoPlan): Happening[] {
  const inShed = trees.flatMap((tree) => tree.coats.filter((coat) => coat.place === 'boatShed').map((coat) => coat.dippedAt))
  const lastRead = Math.min(...inShed) - 2 * millisecondsInHour
  return hours.shifts.flatMap(({ opensAt }): Happening[] => {
    const by = operatorAt(Math.floor(opensAt / millisecondsInDay), 4)
    const at = opensAt + Math.round((2 + 4 * unitOf(opensAt, 7)) * MINUTE)
    const readAt = opensAt + 75 * MINUTE
    return [
      { at, kind: 'stir', by, bath: 'face' },
      { at: at + 4 * MINUTE, kind: 'stir', by, bath: 'backup' },
      ...(readAt < lastRead && unitOf(opensAt, 8) < 0.6 ? [{ at: readAt, kind: 'reading' as const, by, room: shedAir(readAt) }] : []),
    ]
  })
}
