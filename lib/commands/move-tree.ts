import { millisecondsInHour, millisecondsInMinute } from 'date-fns/constants'
import { openTree } from '@/lib/commands/open-tree'
import { addTreeEvent } from '@/lib/commands/tree-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import { formatMoment } from '@/lib/format/local-time'
import { nameList } from '@/lib/format/name-list'
import type { Actor } from '@/lib/members/actor'
import { may } from '@/lib/members/roles'
import { Coat, Foundry, inTransaction, Place, TreePlace, type Tree } from '@/models'

/** A tablet's clock may run a little ahead of ours. */
const FUTURE_LIMIT_MS = 2 * millisecondsInMinute
/** How far back everybody remembers a move; further takes somebody who may correct the log. */
const BACK_LIMIT_MS = millisecondsInHour
/** A rough 'about 20 min ago' may fall before the dip after which the tree was moved. */
const ROUGH_MS = 10 * millisecondsInMinute

/**
 * Hangs a tree somewhere else, from now on or since `movedAt`; the newest coat's dose is split at that moment. Moves that were told for
 * later than that are taken back: so a wrong one is put right. The same place again changes nothing.
 *
 * @returns whether anything has changed.
 * @throws {AppError} not_found for the tree or the place; conflict when the tree has left the floor; unprocessable with `fields` for a time
 *   ahead of the clock, before the newest dip or before the tree; forbidden for one over an hour back, unless the member may correct.
 */
export function moveTree(
  treeId: string,
  placeId: string,
  { member, clock }: { member: Actor; clock: Clock },
  movedAt?: number,
): Promise<boolean> {
  return inTransaction(async () => {
    const tree = await openTree(treeId)
    const places = new Map((await Place.findAll()).map((place) => [place.id, place]))
    const place = places.get(placeId)
    if (!place || place.retiredAt !== null) throw new AppError('not_found', 'There is no such place.')
    const stays = await TreePlace.findAll({
      where: { treeId, withdrawnAt: null },
      order: [
        ['since', 'ASC'],
        ['id', 'ASC'],
      ],
    })
    const now = clock.now()
    const { timeZone } = await Foundry.findByPk(1, { rejectOnEmpty: true })
    const time = (at: number) => formatMoment(at, now, timeZone)
    const current = stays.at(-1)
    const isToldLate = movedAt !== undefined && movedAt < now
    if (movedAt !== undefined && movedAt > now + FUTURE_LIMIT_MS) refuseTime('This time lies ahead of the clock.')
    const since = isToldLate
      ? await earliestFor(tree, movedAt, { stays, member, now, time })
      : // A dip may stand up to two minutes ahead of us: the newest stay has to stay the last one.
        Math.max(now, (current?.since ?? 0) + 1)
    const wrong = stays.filter((stay) => stay.since >= since)
    const before = stays.findLast((stay) => stay.since < since)
    if (wrong.length === 0 && before?.placeId === placeId) return false
    for (const stay of wrong) await stay.update({ withdrawnAt: now })
    if (before?.placeId !== placeId) await TreePlace.create({ id: newId(now), treeId, placeId, since, memberId: member.id })
    const nameOf = (id: string | undefined) => places.get(id ?? '')?.name ?? 'nowhere'
    const hangsSince = before?.placeId === placeId ? before.since : since
    const elsewhere = [...new Set(wrong.map((stay) => stay.placeId))].filter((id) => id !== placeId).map(nameOf)
    const putRight = `Put right: at ${place.name} since ${time(hangsSince)}${elsewhere.length > 0 ? `, not at ${nameList(elsewhere)}` : ''}.`
    const moved = `Moved from ${nameOf(current?.placeId)} to ${place.name}${isToldLate ? ` at ${time(since)}` : ''}.`
    await addTreeEvent(treeId, 'moved', {
      by: member,
      at: now,
      text: wrong.length > 0 ? putRight : moved,
      before: { placeId: current?.placeId ?? null, movedAt: current?.since ?? null },
      after: { placeId, movedAt: hangsSince },
    })
    return true
  })
}

type Told = { stays: readonly TreePlace[]; member: Actor; now: number; time: (at: number) => string }

/** The moment of a move that is told later: after the newest dip, which says where the tree hung, and after the tree itself. */
async function earliestFor(tree: Tree, movedAt: number, { stays, member, now, time }: Told): Promise<number> {
  const newest = await Coat.findOne({ where: { treeId: tree.id, withdrawnAt: null }, order: [['number', 'DESC']] })
  const cameAt = stays[0]?.since ?? 0
  const earliest = Math.max(cameAt, newest?.dippedAt ?? 0)
  if (movedAt <= earliest - ROUGH_MS) {
    refuseTime(
      newest && newest.dippedAt >= cameAt
        ? `Coat ${newest.number} was dipped at ${time(newest.dippedAt)}, and where it hung then was told with it: the move came later.`
        : `${tree.tag} came onto the floor at ${time(cameAt)}: the move came later.`,
    )
  }
  if (movedAt < now - BACK_LIMIT_MS && !may(member.role, 'correct')) {
    throw new AppError('forbidden', 'That was more than an hour ago: ask a supervisor to put it right.')
  }
  return Math.max(movedAt, earliest + 1)
}

function refuseTime(message: string): never {
  throw new AppError('unprocessable', message, { fields: [{ path: 'movedAt', message }] })
}
