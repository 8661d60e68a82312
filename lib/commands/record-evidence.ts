import { millisecondsInMinute } from 'date-fns/constants'
import { openTree } from '@/lib/commands/open-tree'
import { runOperation } from '@/lib/commands/run-operation'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { holdsUntil } from '@/lib/drying/room-segments'
import type { Air, CoatCall } from '@/lib/drying/types'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { FUTURE_LIMIT_MS } from '@/lib/room/check-rows'
import { judge } from '@/lib/trees/assess'
import { SPOTS_OF } from '@/lib/trees/coat-evidence'
import type { EvidenceAnswer, EvidenceInput } from '@/lib/trees/evidence-input'
import { evidenceWords } from '@/lib/trees/evidence-words'
import type { CoatFacts, EvidenceFacts, TreeFacts } from '@/lib/trees/facts'
import { airAround, type FloorContext } from '@/lib/trees/spans'
import { Evidence } from '@/models'

/** A reading this close tells the air beside a surface. */
const AIR_BESIDE_MS = 30 * millisecondsInMinute

/**
 * Records what somebody weighed, felt or saw on the newest coat of a tree, with the clock's own word at that moment beside it. It moves
 * the tree's own factor, and with it the time of the coat on every screen.
 *
 * @throws {AppError} not_found; conflict when another coat is the newest by now, or the tree has left the floor; unprocessable with
 *   `fields` for a spot that the tree does not have, a time ahead or before the coat, and an air that nothing tells.
 */
export function recordEvidence(treeId: string, input: EvidenceInput, { member, clock }: { member: Actor; clock: Clock }) {
  const { operationId } = input
  return runOperation({ operationId, kind: 'evidence', memberId: member.id, body: { treeId, ...input }, clock }, async () => {
    const now = clock.now()
    const tree = await openTree(treeId)
    const takenAt = input.takenAt ?? now
    const { trees, context } = await loadFloor({ now, trees: { ids: [treeId] } })
    const facts = trees[0]?.facts
    if (!facts) throw new AppError('not_found', 'There is no such tree.')
    const coat = facts.coats.at(-1) ?? null
    refuseImpossible(facts, coat, input, { takenAt, now })
    const air = input.kind === 'surface temperature' ? (input.room ?? airBeside(facts, context, takenAt)) : null
    if (input.kind === 'surface temperature' && air === null) {
      const message = 'No sensor tells the air at this place: type its temperature and humidity too.'
      throw new AppError('unprocessable', message, { fields: [{ path: 'room.airTempC', message }] })
    }
    const before = coat && judge(facts, coat, context).call
    const then = coat && judge(facts, coat, context, Math.min(takenAt, now)).call
    const evidence: EvidenceFacts = {
      id: newId(now),
      kind: input.kind,
      spot: 'spot' in input ? input.spot : null,
      verdict: 'verdict' in input ? input.verdict : null,
      moment: 'moment' in input ? input.moment : null,
      massKg: 'massKg' in input ? input.massKg : null,
      surfaceTempC: 'surfaceTempC' in input ? input.surfaceTempC : null,
      airTempC: air?.airTempC ?? null,
      relHumidityPct: air?.relHumidityPct ?? null,
      takenAt: Math.min(takenAt, now),
      by: member.name,
      memberId: member.id,
      doseReferenceHours: null,
    }
    const { by: _by, ...stored } = evidence
    await Evidence.create({
      ...stored,
      treeId,
      coatId: coat?.id ?? null,
      loggedAt: now,
      moistureRatio: then?.moistureRatio ?? null,
      forecastP10At: then?.earliestAt ?? null,
      forecastP50At: then?.likelyAt ?? null,
      forecastP90At: then?.safeAt ?? null,
    })
    await addTreeEvent(treeId, 'evidence', {
      by: member,
      at: now,
      text: `${coat === null ? 'Bare wax' : `Coat ${coat.number}`}: ${evidenceWords(evidence)}.`,
      ...(coat === null ? {} : { coatId: coat.id }),
    })
    const heard = coat && hear(facts, coat, evidence, context)
    return {
      status: 201,
      response: {
        treeId: tree.id,
        evidenceId: evidence.id,
        kind: evidence.kind,
        before: before && pairOf(before),
        after: heard && pairOf(heard.call),
        unheard: heard?.unheard ?? null,
      } satisfies EvidenceAnswer,
    }
  })
}

const pairOf = ({ likelyAt, safeAt }: CoatCall) => ({ likelyAt, safeAt })

/** The call with one more piece of evidence. */
function hear(facts: TreeFacts, coat: CoatFacts, evidence: EvidenceFacts, context: FloorContext) {
  const withIt = { ...coat, evidence: [...coat.evidence, evidence] }
  const { call, belief } = judge({ ...facts, coats: [...facts.coats.slice(0, -1), withIt] }, withIt, context)
  return { call, unheard: belief.heard.find((heard) => heard.evidence.id === evidence.id)?.unheard ?? null }
}

function refuseImpossible(
  { tag, recessClass, coats }: TreeFacts,
  coat: CoatFacts | null,
  input: EvidenceInput,
  { takenAt, now }: { takenAt: number; now: number },
): void {
  if (input.coatNumber !== coats.length) {
    const standing = coat === null ? 'has no coat on' : `has coat ${coat.number} on by now`
    throw new AppError('conflict', `${tag} ${standing}: nothing was kept.`)
  }
  if (coat === null && !(input.kind === 'weighing' && input.moment === 'before dip')) {
    throw new AppError('conflict', `${tag} has no coat on yet: only its weight before the dip can be noted.`)
  }
  if ('spot' in input && !SPOTS_OF[recessClass].includes(input.spot)) refuse('spot', `${tag} has no ${input.spot}.`)
  if (takenAt > now + FUTURE_LIMIT_MS) refuse('takenAt', 'This time lies ahead of the clock.')
  if (coat !== null && takenAt < coat.dippedAt) refuse('takenAt', `This time lies before the dip of coat ${coat.number}.`)
}

function refuse(path: string, message: string): never {
  throw new AppError('unprocessable', message, { fields: [{ path, message }] })
}

/** The air where the tree hung, by the reading nearest in time; null where none is near. */
function airBeside(facts: TreeFacts, context: FloorContext, at: number): Air | null {
  const climate = airAround(context, facts.stays, at, at).at(-1)?.climate
  const near = climate?.exact.filter(
    (reading) => Math.abs(reading.measuredAt - at) <= AIR_BESIDE_MS || (reading.measuredAt <= at && holdsUntil(reading) >= at),
  )
  const [nearest] = near?.toSorted((a, b) => Math.abs(a.measuredAt - at) - Math.abs(b.measuredAt - at)) ?? []
  return nearest ? { airTempC: nearest.airTempC, relHumidityPct: nearest.relHumidityPct } : null
}
