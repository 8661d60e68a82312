import { TZDate } from '@date-fns/tz'
import { wetBulbDepressionK } from '@/lib/drying/room-factor'
import { DEFAULT_MOISTURE_TARGET } from '@/lib/drying/recipe-defaults'
import { localDay } from '@/lib/format/local-time'
import type { Queue, QueueBath, QueueRoom, QueueTree } from '@/lib/queue/contract'
import type { RoomClimate } from '@/lib/room/climate'
import { dryingPull } from '@/lib/room/drying-pull'
import type { PlaceFans } from '@/lib/room/fans-contract'
import { hasFans } from '@/lib/room/place-air'
import { nextOpenInstant, type Shift } from '@/lib/schedule/shifts'
import { SPOTS_OF } from '@/lib/trees/coat-evidence'
import type { DerivedTree } from '@/lib/trees/derive'
import type { PlaceFacts } from '@/lib/trees/facts'
import type { FloorContext } from '@/lib/trees/spans'

/** One tree as the floor shows it. */
export function queueTree(tree: DerivedTree, places: ReadonlyMap<string, PlaceFacts>): QueueTree {
  const { facts, call, newest, next } = tree
  const place = places.get(facts.stays.at(-1)?.placeId ?? '')
  const isDry = call !== null && (tree.isLastOn ? call.isSafeDry : call.guardReachedAt !== null)
  return {
    id: facts.id,
    tag: facts.tag,
    title: facts.title,
    isDemo: facts.isDemo,
    place: { id: place?.id ?? '', name: place?.name ?? '' },
    state: tree.state,
    stateSince: tree.stateSince,
    coatsOn: facts.coats.length,
    newestCoat: newest ? { id: newest.id, number: newest.number, dippedAt: newest.dippedAt } : null,
    coats: sectionCoats(tree),
    openDry: call && !isDry ? 1 - call.moistureRatio : null,
    openTarget: 1 - (newest?.moistureTarget ?? DEFAULT_MOISTURE_TARGET),
    moistureRatio: call?.moistureRatio ?? null,
    next: next
      ? {
          number: next.number,
          kind: next.kind,
          bathId: next.bathId,
          bathName: next.bathName,
          stucco: next.stucco,
          drainSeconds: next.drainSeconds,
          isPrewet: next.isPrewet,
          readAloud: next.readAloud,
        }
      : null,
    guard: tree.guard,
    dry: call && !call.isUnknown ? { earliestAt: call.earliestAt, likelyAt: call.likelyAt, safeAt: call.safeAt } : null,
    driedOut: tree.driedOut,
    isUncalibrated: newest !== null && !newest.isCalibrated,
    isPlanUncalibrated:
      facts.recipe.coats.some((coat) => coat.number > facts.coats.length && !coat.isCalibrated) || newest?.isCalibrated === false,
    pourDate: facts.pourDate,
    willMissPour: tree.willMissPour,
    hold: facts.hold,
    word: facts.word,
    spots: [...SPOTS_OF[facts.recessClass]],
    warnings: tree.warnings,
  }
}

/** The recipe's coats, those that are on as they were really put on. */
function sectionCoats({ facts }: DerivedTree): QueueTree['coats'] {
  const on = facts.coats.map(({ kind, stucco }) => ({ kind, stucco }))
  const toCome = facts.recipe.coats.filter((coat) => coat.number > on.length).map(({ kind, stucco }) => ({ kind, stucco }))
  return [...on, ...toCome]
}

/** One sensor's air, in numbers and in a word. */
export function queueRoom(
  climate: RoomClimate,
  { name, kind }: { name: string; kind: 'logger' | 'wall hygrometer' },
  pressurePa: number,
): QueueRoom {
  const { newest } = climate
  const gapK = newest ? wetBulbDepressionK(newest, pressurePa) : null
  const pull =
    newest === null || gapK === null || climate.isStale ? 'not known' : dryingPull({ wetBulbGapK: gapK, roomFactor: newest.roomFactor })
  return {
    sensorId: climate.sensorId,
    sensorName: name,
    airTempC: newest?.airTempC ?? null,
    relHumidityPct: newest?.relHumidityPct ?? null,
    wetBulbGapK: gapK,
    speedPct: newest ? newest.roomFactor * 100 : null,
    pull,
    measuredAt: newest?.measuredAt ?? null,
    source: newest?.source ?? null,
    isStale: climate.isStale,
    isTypedOnly: kind === 'wall hygrometer',
  }
}

/** How the fans of a place stand, and whose word that is; null where there is nothing to switch. */
export function placeFansOf(
  place: PlaceFacts,
  { fans }: FloorContext,
  switches: ReadonlyMap<string, readonly { at: number; by: string }[]>,
): PlaceFans | null {
  const now = fans.get(place.id)
  if (!now || !hasFans(place)) return null
  const { isOn, until, saidAt } = now
  const by = switches.get(place.id)?.findLast(({ at }) => at === saidAt)?.by
  return { isOn, until, said: saidAt === null ? null : { at: saidAt, by: by ?? '' } }
}

/** A bath and whether somebody stirred it on this local day. */
export function queueBath(
  bath: { id: string; name: string; kind: 'face' | 'backup' },
  stir: { at: number; by: string } | null,
  { now, timeZone }: { now: number; timeZone: string },
): QueueBath {
  return {
    ...bath,
    stirredAt: stir?.at ?? null,
    stirredBy: stir?.by ?? null,
    isStirredToday: stir !== null && localDay(stir.at, timeZone) === localDay(now, timeZone),
  }
}

/** The tide axis: what is left of this shift, and the next one. Outside the hours the axis begins with a night. */
export function queueShift(now: number, shifts: readonly Shift[], timeZone: string): Queue['shift'] {
  const current = shifts[0]
  const isOpen = current !== undefined && current.opensAt <= now
  const next = isOpen ? shifts[1] : current
  const nextStartsAt = next?.opensAt ?? nextOpenInstant(now, shifts) ?? new TZDate(now, timeZone).getTime()
  return { isOpen, endsAt: isOpen ? current.closesAt : now, nextStartsAt, nextEndsAt: next?.closesAt ?? nextStartsAt }
}
