import { millisecondsInMinute } from 'date-fns/constants'
import { dipRunAnswer, type DipRefusal, type DipRun, type DipRunAnswer } from '@/lib/coats/dip-contract'
import { addTreeEvent } from '@/lib/commands/tree-event'
import { closeCoat } from '@/lib/commands/close-coat'
import { recordReadings } from '@/lib/commands/record-readings'
import { tellSupervisors } from '@/lib/commands/tell-supervisors'
import { runOperation } from '@/lib/commands/run-operation'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { chillFlag } from '@/lib/drying/flags'
import { needReferenceHours } from '@/lib/drying/need'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { holdsUntil } from '@/lib/drying/room-segments'
import type { RoomReading } from '@/lib/drying/types'
import type { Actor } from '@/lib/members/actor'
import { deriveFloor } from '@/lib/queries/floor'
import { loadFacts } from '@/lib/queries/load-facts'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { callOf, recipeCoatOf } from '@/lib/trees/assess'
import { slowestSpot } from '@/lib/trees/coat-evidence'
import { clockStart, type CoatFacts, type TreeFacts } from '@/lib/trees/facts'
import { wordOf } from '@/lib/trees/word'
import { Bath, Coat, Member, TreePlace, database } from '@/models'
import { airOf, type FloorContext } from '@/lib/trees/spans'

/** A tablet's clock may run a little ahead of ours. */
const FUTURE_LIMIT_MS = 2 * millisecondsInMinute
/** A reading this close to the dip tells the air at the dip. */
const AIR_AT_DIP_MS = 30 * millisecondsInMinute

/**
 * Logs a run: every tree gets its coat, or none does. What was made is recorded with its deviations, never refused for them.
 *
 * @throws {AppError} not_found for an unknown tree, bath or place, and for a retired place; conflict with `trees` when a coat is already on, one is
 *   skipped or the tree has left the floor; unprocessable for a time ahead of the clock or before the coat below.
 */
export async function logDips(run: DipRun, { member, clock }: { member: Actor; clock: Clock }) {
  const answer = await runOperation({ operationId: run.operationId, kind: 'dips', memberId: member.id, body: run, clock }, async () => {
    const coats = await putCoatsOn(run, member, clock.now())
    return { status: 201, response: { operationId: run.operationId, coats } satisfies DipRunAnswer }
  })
  return answer.replayed ? { ...answer, response: await markWithdrawn(answer.response) } : answer
}

/**
 * What was taken on this coat before it was logged, while the tablet still named the one below; and on the same coat before it was
 * taken back and logged again: a weight after the stucco cannot be taken twice.
 */
async function takeEvidenceAlong(treeId: string, coat: CoatFacts, belowId: string | null): Promise<void> {
  await database.query(
    `UPDATE evidence SET coat_id = :coatId
      WHERE tree_id = :treeId AND taken_at > :dippedAt AND withdrawn_at IS NULL AND moment IS NOT 'before dip'
        AND (coat_id = :belowId OR coat_id IN (SELECT id FROM coats WHERE tree_id = :treeId AND number = :number AND withdrawn_at IS NOT NULL))`,
    { replacements: { coatId: coat.id, treeId, dippedAt: coat.dippedAt, belowId, number: coat.number } },
  )
}

/** A replay tells which of its coats were taken back since. */
async function markWithdrawn(response: Record<string, unknown>): Promise<Record<string, unknown>> {
  const coats = await Coat.findAll({ where: { operationId: String(response['operationId']) } })
  const withdrawn = new Set(coats.filter((coat) => coat.withdrawnAt !== null).map((coat) => coat.id))
  const answered = dipRunAnswer.parse(response)
  return { ...answered, coats: answered.coats.map((coat) => (withdrawn.has(coat.coatId) ? { ...coat, withdrawn: true } : coat)) }
}

async function putCoatsOn(run: DipRun, member: Actor, now: number): Promise<DipRunAnswer['coats']> {
  const bath = await Bath.findByPk(run.bathId)
  if (!bath) throw new AppError('not_found', 'There is no such bath.')
  if (run.dippedAt > now + FUTURE_LIMIT_MS) {
    throw new AppError('unprocessable', 'The dip lies in the future: check the clock of this tablet.')
  }
  const treeIds = run.trees.map((tree) => tree.treeId)
  if (new Set(treeIds).size !== treeIds.length) throw new AppError('unprocessable', 'A tree can be in a run only once.')

  const [foundry, facts] = await Promise.all([loadFoundry(), loadFacts({ ids: treeIds })])
  const factsOf = new Map(facts.map((tree) => [tree.id, tree]))
  const placeOf = new Map(foundry.places.map((place) => [place.id, place]))
  const chosen = run.trees.map((tree) => {
    const treeFacts = factsOf.get(tree.treeId)
    if (!treeFacts) throw new AppError('not_found', 'There is no such tree.', { treeId: tree.treeId })
    const place = placeOf.get(tree.placeId)
    if (!place) throw new AppError('not_found', 'There is no such place.', { placeId: tree.placeId })
    if (place.isRetired) {
      throw new AppError('not_found', `${place.name} is not used any more: choose where it hangs.`, { placeId: tree.placeId })
    }
    return { ...tree, facts: treeFacts, place }
  })
  await refuseImpossible(chosen, run)

  if (run.room) {
    const sensorIds = new Set(chosen.filter(({ place }) => place.isTypedOnly).map(({ place }) => place.sensorId))
    for (const sensorId of sensorIds) {
      await recordReadings(
        { sensorId, source: 'typed', enteredBy: member.id, rows: [{ ...run.room, measuredAt: Math.min(run.dippedAt, now) }] },
        { clock: { now: () => now } },
      )
    }
  }

  const { context } = await deriveFloor(foundry, facts, now, [run.dippedAt])
  const answers: DipRunAnswer['coats'] = []
  for (const { facts: tree, place, coatNumber, placeId, reason } of chosen) {
    const below = tree.coats.at(-1) ?? null
    const belowCall = below ? callOf(tree, below, context, run.dippedAt) : null
    const saidBefore = below ? below.evidence.filter((piece) => piece.takenAt <= run.dippedAt) : []
    const saidDry = wordOf(saidBefore, slowestSpot(tree.recessClass))?.verdict === 'dry'
    const isBelowDry = below === null || belowCall === null || belowCall.moistureRatio <= below.moistureTarget || saidDry
    // Early is before the guard, as on the sheet: likely dry is not safe under a face coat or in a recess.
    const isEarly = belowCall !== null && belowCall.guardReachedAt === null && !saidDry
    const moistureRatioBelow = isBelowDry ? 0 : belowCall.moistureRatio
    const planned = recipeCoatOf(tree, coatNumber)
    const asPlanned = planned ?? tree.recipe.coats.findLast((coat) => coat.stucco === run.stucco) ?? tree.recipe.coats.at(-1)
    // Beyond the recipe a coat has to dry as far as its last one.
    const last = planned ?? tree.recipe.coats.at(-1)
    if (!asPlanned || !last) throw new AppError('unprocessable', `The recipe of ${tree.tag} has no coat.`)
    const air = airAt(context, airOf(place, run.dippedAt).sensorId, run.dippedAt)
    const deviations: Deviation[] = [
      ...asList(tree.hold !== null, 'held'),
      ...asList(tree.intakePassedAt === null, 'intake open'),
      ...asList(isEarly, belowCall?.isUnknown ? 'unknown' : 'still wet'),
      ...asList(planned === null, 'not in the recipe'),
      ...asList(planned !== null && planned.bathId !== run.bathId, 'other bath'),
      ...asList(planned !== null && planned.stucco !== run.stucco, 'other stucco'),
      ...asList(asPlanned.kind === 'face' && air !== null && isTooDryForFace(coatNumber, air, context, placeId), 'too dry for face'),
    ]
    const closed = below && belowCall ? await closeCoat(below, tree, context, { at: run.dippedAt, call: belowCall }) : null
    const coat: CoatFacts = {
      id: newId(now),
      number: coatNumber,
      kind: asPlanned.kind,
      stucco: run.stucco,
      way: run.way,
      placeId,
      dippedAt: run.dippedAt,
      drainSeconds: run.drainSeconds,
      roughMinutes: run.roughTime ?? 0,
      needReferenceHours: needReferenceHours({
        recipeReferenceHours: asPlanned.needReferenceHours,
        recipeStucco: asPlanned.stucco,
        usedStucco: run.stucco,
        spacing: tree.spacing,
        recessClass: tree.recessClass,
        moistureRatioBelow,
        treeTheta: 0,
        recessFactors: foundry.recessFactors,
      }),
      moistureTarget: last.moistureTarget,
      guard: last.guard,
      longestWaitHours: last.longestWaitHours,
      needSpread: asPlanned.needSpread,
      isCalibrated: asPlanned.isCalibrated,
      recessFactor: foundry.recessFactors[tree.recessClass],
      airTempC: air?.airTempC ?? null,
      coveredAt: null,
      moistureRatioAtRedip: null,
      evidence: [],
    }
    // A dip told late may lie before a later move: what counts is where the tree hung then.
    const hungAt = tree.stays.findLast((stay) => stay.since <= run.dippedAt) ?? tree.stays.at(-1)
    const hasMoved = hungAt?.placeId !== placeId
    if (hasMoved) await TreePlace.create({ id: newId(now), treeId: tree.id, placeId, since: run.dippedAt, memberId: member.id })
    const after: TreeFacts = {
      ...tree,
      coats: [...(closed ? [...tree.coats.slice(0, -1), closed] : tree.coats), coat],
      stays: hasMoved ? [...tree.stays, { placeId, since: run.dippedAt }].toSorted((a, b) => a.since - b.since) : tree.stays,
      word: null,
    }
    const call = callOf(after, coat, context, Math.max(now, clockStart(coat)))
    const { needReferenceHours: need, evidence: _evidence, ...stored } = coat
    await Coat.create({
      ...stored,
      treeId: tree.id,
      operationId: run.operationId,
      bathId: run.bathId,
      loggedBy: member.id,
      loggedAt: now,
      deviations,
      reason: reason ?? null,
      relHumidityPct: air?.relHumidityPct ?? null,
      needReferenceHours: need,
      recipeReferenceHours: asPlanned.needReferenceHours,
      moistureRatioBelow,
      forecastP10At: call.earliestAt,
      forecastP50At: call.likelyAt,
      forecastP90At: call.safeAt,
    })
    await takeEvidenceAlong(tree.id, coat, below?.id ?? null)
    await addTreeEvent(tree.id, 'coat on', {
      by: member,
      at: now,
      text: `Coat ${coatNumber} dipped${deviations.length > 0 ? `: ${deviations.join(', ')}${reason ? ` (${reason})` : ''}` : ''}.`,
      coatId: coat.id,
      dippedAt: run.dippedAt,
    })
    if (deviations.some((deviation) => TOLD_TO_SUPERVISORS.has(deviation))) {
      await tellSupervisors(
        {
          coatId: coat.id,
          treeId: tree.id,
          tag: tree.tag,
          title: tree.title,
          placeName: place.name,
          coatNumber,
          deviations: deviations.map((deviation) => DEVIATION_SENTENCE[deviation]),
          reason: reason ?? null,
        },
        { clock: { now: () => now } },
      )
    }
    answers.push({
      coatId: coat.id,
      treeId: tree.id,
      tag: tree.tag,
      number: coatNumber,
      likelyAt: call.likelyAt,
      safeAt: call.safeAt,
      deviations,
    })
  }
  return answers
}

const DEVIATION_SENTENCE = {
  held: 'The tree was held',
  'intake open': 'Its intake was open',
  unknown: 'No reading told whether the coat below was dry',
  'still wet': 'The coat below was not dry by its guard yet',
  'not in the recipe': 'The recipe has no such coat',
  'other bath': 'Another bath than the recipe',
  'other stucco': 'Another stucco than the recipe',
  'too dry for face': 'The air was too dry for a face coat',
} as const
type Deviation = keyof typeof DEVIATION_SENTENCE

/** A supervisor hears of a dip that can cost the shell. */
const TOLD_TO_SUPERVISORS: ReadonlySet<Deviation> = new Set(['held', 'still wet', 'unknown', 'intake open'])

const asList = (isSo: boolean, deviation: Deviation): Deviation[] => (isSo ? [deviation] : [])

type Chosen = { facts: TreeFacts; coatNumber: number }

/** What cannot have happened, or has been told already by somebody else. */
async function refuseImpossible(chosen: readonly Chosen[], run: DipRun): Promise<void> {
  const refusals: DipRefusal[] = []
  for (const { facts, coatNumber } of chosen) {
    const base = { treeId: facts.id, tag: facts.tag, coatNumber, by: null, at: null }
    if (facts.releasedAt !== null || facts.scrappedAt !== null) {
      const word = facts.releasedAt === null ? 'scrapped' : 'released'
      refusals.push({ ...base, reason: 'left the floor', detail: `${facts.tag} was ${word} and takes no more coats.` })
    } else if (coatNumber <= facts.coats.length) {
      const standing = await Coat.findOne({ where: { treeId: facts.id, number: coatNumber, withdrawnAt: null } })
      const author = standing && (await Member.findByPk(standing.loggedBy))
      refusals.push({
        ...base,
        reason: 'coat already on',
        by: author?.name ?? null,
        at: standing?.dippedAt ?? null,
        detail: `Coat ${coatNumber} of ${facts.tag} is already on${author ? `: logged by ${author.name}` : ''}.`,
      })
    } else if (coatNumber > facts.coats.length + 1) {
      refusals.push({
        ...base,
        reason: 'coat skipped',
        detail: `${facts.tag} has ${facts.coats.length} on: coat ${coatNumber} would skip one.`,
      })
    }
  }
  if (refusals.length > 0) {
    throw new AppError('conflict', 'Nothing was logged: some trees of this run do not take this coat.', { trees: refusals })
  }
  const early = chosen.filter(({ facts }) => run.dippedAt < (facts.coats.at(-1)?.dippedAt ?? 0))
  if (early.length > 0) {
    throw new AppError('unprocessable', `The dip of ${early.map(({ facts }) => facts.tag).join(', ')} would lie before the coat below.`)
  }
}

/** The reading nearest to an instant in one room, within half an hour; a typed reading counts for as long as it holds after it. */
function airAt(context: FloorContext, sensorId: number, at: number): RoomReading | null {
  const distance = ({ measuredAt }: RoomReading) => Math.abs(measuredAt - at)
  const telling = (context.climates.get(sensorId)?.exact ?? []).filter(
    (reading) => distance(reading) <= AIR_AT_DIP_MS || (reading.measuredAt <= at && holdsUntil(reading) >= at),
  )
  return telling.toSorted((a, b) => distance(a) - distance(b))[0] ?? null
}

function isTooDryForFace(coatNumber: number, air: RoomReading, context: FloorContext, placeId: string): boolean {
  const span = context.placeSpans.get(placeId)?.find((candidate) => candidate.from <= air.measuredAt && candidate.to > air.measuredAt)
  const flag = chillFlag({
    coatNumber,
    wetBulbDepressionK: wetBulbDepressionK(air, context.pressurePa),
    roomFactor: air.roomFactor,
    placeFactor: span?.placeFactor ?? 1,
  })
  return flag !== null
}
