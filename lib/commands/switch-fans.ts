import type { z } from 'zod'
import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { runOperation } from '@/lib/commands/run-operation'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { FanState } from '@/lib/drying/types'
import { formatMoment } from '@/lib/format/local-time'
import type { Actor } from '@/lib/members/actor'
import { loadFanSwitches } from '@/lib/queries/load-fan-switches'
import { loadFoundry } from '@/lib/queries/load-foundry'
import type { fansAnswer, fansInput } from '@/lib/room/fans-contract'
import { hasFans } from '@/lib/room/place-air'
import { fansAt, type FansNow } from '@/lib/trees/spans'
import { FanSwitch } from '@/models'

/**
 * Takes in that the fans of a place go on or off now, whatever the timetable says, until its own next switch; 'timetable' takes that back.
 * What is so already changes nothing.
 *
 * @throws {AppError} not_found for a place that is not in use; conflict where the air is the same with and without fans.
 */
export function switchFans(
  placeId: string,
  { operationId, state }: z.infer<typeof fansInput>,
  { member, clock }: { member: Actor; clock: Clock },
) {
  const body = { placeId, state }
  return runOperation({ operationId, kind: 'switch fans', memberId: member.id, body, clock }, async () => {
    const { isOn, until } = await switchNow(placeId, state, operationId, { member, now: clock.now() })
    return { status: 200, response: { placeId, isOn, until } satisfies z.infer<typeof fansAnswer> }
  })
}

async function switchNow(
  placeId: string,
  state: FanState,
  operationId: string,
  { member, now }: { member: Actor; now: number },
): Promise<FansNow> {
  const [{ places, timeZone }, allSwitches] = await Promise.all([loadFoundry(), loadFanSwitches(now)])
  const place = places.find(({ id }) => id === placeId)
  if (!place || place.isRetired) throw new AppError('not_found', 'There is no such place.')
  if (!hasFans(place)) throw new AppError('conflict', `${place.name} has the same air with fans and without: there is nothing to switch.`)
  const switches = allSwitches.get(placeId) ?? []
  // Where our clock was set back, the newest word has to stay the last one.
  const at = Math.max(now, switches.at(-1)?.at ?? 0)
  const before = fansAt(place, switches, at, timeZone)
  const isSoAlready = state === 'timetable' ? before.saidAt === null : before.isOn === (state === 'on')
  if (isSoAlready) return before
  const after = fansAt(place, [...switches, { at, state }], at, timeZone)
  await FanSwitch.create({ placeId, at, state, memberId: member.id, operationId })
  const until =
    after.until === null ? 'until somebody says otherwise' : `until ${formatMoment(after.until, now, timeZone)}, then by the timetable`
  const text =
    state === 'timetable'
      ? `Fans of ${place.name} by the timetable again: ${after.isOn ? 'on' : 'off'} now.`
      : `Fans of ${place.name} switched ${state}, ${until}.`
  await addFoundryEvent(
    { type: 'place', id: placeId, name: place.name },
    { kind: 'fans switched', by: member, at: now, text, before: { fans: inWords(before) }, after: { fans: inWords(after) } },
  )
  return after
}

const inWords = ({ isOn, saidAt }: FansNow) => `${isOn ? 'on' : 'off'}, ${saidAt === null ? 'by the timetable' : 'as told'}`
