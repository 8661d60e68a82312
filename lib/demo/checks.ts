import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { demoAirAt, type DemoClimate } from '@/lib/demo/climate'
import { demandOf, type PlannedCoat, type PlanParts, type Shape } from '@/lib/demo/plan-coats'
import { DEMO_PLACES, DEMO_SETTING } from '@/lib/demo/shop'
import { lastAtWork, shiftAt, type WorkHours } from '@/lib/demo/work-hours'
import { stationPressurePa } from '@/lib/drying/air'
import { moistureRatio } from '@/lib/drying/moisture'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { slowestSpot } from '@/lib/trees/coat-evidence'
import type { EvidenceInput } from '@/lib/trees/evidence-input'

/** What somebody took, without what its moment and its tree tell. */
export type TakenEvidence = EvidenceInput extends infer Input
  ? Input extends EvidenceInput
    ? Omit<Input, 'operationId' | 'coatNumber' | 'takenAt'>
    : never
  : never

/** One look, touch, weighing or temperature; `isMistake`: taken back two minutes later. */
export type PlannedCheck = { at: number; coatNumber: number; evidence: TakenEvidence; isMistake: boolean }

type Parts = PlanParts & { climate: DemoClimate }

const MINUTE = millisecondsInMinute

/** How a coat was checked: weighed, felt, or now and then measured with a thermometer. */
const MEANS = ['weighing', 'touch', 'weighing', 'weighing', 'surface', 'weighing'] as const
/** Share of its true need at which each tells most. */
const TELLS_MOST = { touch: 0.93, weighing: 0.5, surface: 0.75 } as const
/** Long before it is dry, nobody feels a coat. */
const FELT_FROM = 0.8

/**
 * What people took on the coats of a tree before the next one went on, as their true need has it: 'not yet' while it dries, 'dry' before the
 * next dip, and what a scale and a thermometer show between.
 *
 * @param until when the last coat is looked over or released.
 */
export function planChecks(shape: Shape, coats: readonly PlannedCoat[], until: number, parts: Parts): PlannedCheck[] {
  const checks: PlannedCheck[] = []
  let massKg = 1.3 * shape.tree.waxMassKg
  const weigh = (at: number, coatNumber: number, moment: 'before dip' | 'after stucco' | 'now', kg: number) =>
    checks.push({ at, coatNumber, evidence: { kind: 'weighing', moment, massKg: Math.round(kg * 500) / 500 }, isMistake: false })
  const offset = Math.floor(parts.random() * MEANS.length)
  let wasWeighed = false
  let hasMistake = shape.tree.story?.kind !== 'mistaken touch'
  for (const [index, coat] of coats.entries()) {
    const end = coats[index + 1]?.dippedAt ?? until
    const { need, coat: planned } = demandOf(shape, coat.number)
    // A wax of one kilogram weighs about ten after as many coats.
    const addedKg = 0.75 * shape.tree.waxMassKg * (planned.kind === 'face' ? 0.7 : 1)
    const waterKg = addedKg * (planned.stucco === 'none' ? 0.27 : 0.15) * (0.95 + 0.1 * parts.random())
    const start = coat.dippedAt + coat.drainSeconds * 1000
    const trueNeed = need.likely * (coat.truth ?? 1)
    const leftAt = (at: number) => moistureRatio(parts.room.doseBetween(coat.place, start, at).likely, trueNeed, planned.moistureTarget)
    const massAt = (at: number) => massKg + addedKg - waterKg * (1 - leftAt(at))
    // Of the face coats every other one: they dry as the recipe says.
    const isLeftAlone = coat.truth === null || (planned.kind === 'face' && (index + offset) % 2 === 0)
    const means = isLeftAlone ? null : MEANS[(index + offset) % MEANS.length]!
    const atShare = (share: number) => parts.room.whenDose(coat.place, start, share * trueNeed, 'likely')
    const half = means === null ? null : whileDrying(atShare(TELLS_MOST[means]), start, end, parts.hours)
    if (means === 'weighing') {
      if (!wasWeighed) weigh(coat.dippedAt - 6 * MINUTE, coat.number - 1, 'before dip', massKg)
      weigh(start + 3 * MINUTE, coat.number, 'after stucco', massAt(start))
      if (half !== null) weigh(half, coat.number, 'now', massAt(half))
      weigh(end - 5 * MINUTE, coat.number, 'before dip', massAt(end - 5 * MINUTE))
    }
    if (means === 'surface' && half !== null) {
      const surface = surfaceAt(half, coat, leftAt(half), parts)
      if (surface !== null) checks.push({ at: half, coatNumber: coat.number, evidence: surface, isMistake: false })
    }
    const spot = slowestSpot(shape.recessClass)
    const touch = (at: number, verdict: 'dry' | 'not yet', isMistake = false) =>
      checks.push({ at, coatNumber: coat.number, evidence: { kind: 'touch', spot, verdict }, isMistake })
    if (means === 'touch' && half !== null && half >= (atShare(FELT_FROM) ?? Infinity)) {
      touch(half, 'not yet')
    }
    if (!hasMistake && half !== null) {
      touch(half + 4 * MINUTE, 'dry', true)
      hasMistake = true
    }
    // Who has weighed it feels it once more at the bath; who goes by the touch comes back as soon as it may be dry.
    const dryAt = means === 'touch' ? atShare(1.03 + 0.08 * parts.random()) : null
    if (means !== null) touch(whenFeltDry(dryAt, end, parts.hours), 'dry')
    wasWeighed = means === 'weighing'
    massKg = massAt(end)
  }
  return checks
}

/** A moment with people at work around an instant while the coat dries; null where there is none that tells. */
function whileDrying(wanted: number | null, start: number, end: number, hours: WorkHours): number | null {
  if (wanted === null) return null
  const at = lastAtWork(hours, Math.min(wanted, end - 20 * MINUTE), MINUTE)
  return at !== null && at > start + 0.4 * millisecondsInHour ? Math.floor(at / 1000) * 1000 : null
}

/** As soon as somebody is there once it is dry, before the next one goes on. */
function whenFeltDry(dryAt: number | null, end: number, hours: WorkHours): number {
  const last = end - 3 * MINUTE
  if (dryAt === null || dryAt >= last) return last
  if (shiftAt(hours, dryAt)) return Math.ceil(dryAt / 1000) * 1000
  const opening = hours.shifts.find(({ opensAt }) => opensAt > dryAt)
  return opening === undefined ? last : Math.min(last, opening.opensAt + 4 * MINUTE)
}

/** What a thermometer shows: the surface is as cold as its drying keeps it. Null where the air is too damp to tell. */
function surfaceAt(at: number, coat: PlannedCoat, moistureLeft: number, { climate }: Parts): TakenEvidence | null {
  const { air: of } = DEMO_PLACES[coat.place]
  if (of === null) return null
  const air = demoAirAt(climate, of, at)
  const depressionK = wetBulbDepressionK(air, stationPressurePa(DEMO_SETTING.altitudeM))
  const share = Math.min(1, moistureLeft / 0.45)
  const surfaceTempC = Math.round((air.airTempC - share * depressionK) * 10) / 10
  // They read the air beside it too: the loft's logger once lost a night.
  return depressionK < 3.3 ? null : { kind: 'surface temperature', spot: 'outside', surfaceTempC, room: air }
}
