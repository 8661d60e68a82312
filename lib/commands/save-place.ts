import { addFoundryEvent } from '@/lib/commands/foundry-event'
import { refuseField } from '@/lib/commands/refuse-field'
import { requireFreeName } from '@/lib/commands/require-free-name'
import { stopBeingDemo } from '@/lib/commands/stop-being-demo'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { FanHours as Fans } from '@/lib/drying/types'
import { localDay } from '@/lib/format/local-time'
import { nameList } from '@/lib/format/name-list'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { hangingTrees } from '@/lib/queries/hanging-trees'
import type { AirMeasured } from '@/lib/room/place-air'
import type { AirSince, PlaceInput } from '@/lib/room/place-input'
import { weekWords } from '@/lib/schedule/week-words'
import { database, FanHours, FormerAir, Foundry, inTransaction, Place, Sensor } from '@/models'

type By = { member: Actor; clock: Clock }

/** Covered coats that hung there were judged by doses of the wrong air: they are kept as they were told, and not learned from. */
async function markMeasuredInOtherAir(placeId: string, now: number): Promise<void> {
  const former = await FormerAir.findOne({ where: { placeId }, order: [['until', 'DESC']] })
  const lastChange = former?.until ?? 0
  await database.query(
    `UPDATE coats SET air_changed_at = :now
      WHERE covered_at > :lastChange AND withdrawn_at IS NULL AND air_changed_at IS NULL AND outcome_theta IS NOT NULL
        AND tree_id IN (SELECT tree_id FROM tree_places WHERE place_id = :placeId AND withdrawn_at IS NULL)`,
    { replacements: { now, lastChange, placeId } },
  )
}

/**
 * Adds a place where trees hang.
 *
 * @throws {AppError} conflict with `fields` for a name that is taken or a sensor that is not in use.
 */
export function createPlace(input: PlaceInput, { member, clock }: By): Promise<{ placeId: string }> {
  return inTransaction(async () => {
    const now = clock.now()
    requireFreeName(input.name, { among: await Place.findAll(), kind: 'place', ownId: null })
    const sensor = await requireSensor(input.sensorId)
    await requirePastDay(input.airMeasuredOn, now)
    const { fans, ...columns } = input
    const placeId = newId(now)
    await Place.create({ ...columns, id: placeId, isDemo: member.isDemo ?? false, createdAt: now })
    await FanHours.bulkCreate(fans.map((row) => ({ ...row, placeId })))
    await addFoundryEvent(
      { type: 'place', id: placeId, name: input.name },
      { kind: 'place added', by: member, at: now, text: `Place ${input.name} added.`, after: inWords(input, fans, sensor.name) },
    )
    return { placeId }
  })
}

/**
 * Changes a place in use. From now on, another air leaves what has dried so far as it was; as a correction, every coat that is still open
 * is worked out again with it.
 *
 * @throws {AppError} not_found; conflict when it is retired, with `fields` for a name that is taken or a sensor that is not in use.
 */
export function changePlace(placeId: string, input: PlaceInput, since: AirSince, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const place = await placeInUse(placeId)
    requireFreeName(input.name, { among: await Place.findAll(), kind: 'place', ownId: placeId })
    const sensor = await requireSensor(input.sensorId)
    await requirePastDay(input.airMeasuredOn, now)
    const formerSensor = await Sensor.findByPk(place.sensorId, { rejectOnEmpty: true })
    const formerFans = await FanHours.findAll({ where: { placeId } })
    const { fans, ...columns } = input
    // What finished coats said of the air was said of those speeds.
    const airFactor = isOtherSpeed(place, input) ? 1 : place.airFactor
    const changed = changedFields(
      { ...inWords(place, formerFans, formerSensor.name), airFactor: place.airFactor },
      { ...inWords(input, fans, sensor.name), airFactor },
    )
    if (Object.keys(changed.after).length === 0) return
    const isOtherAir = Object.keys(changed.after).some((field) => !NO_AIR_FIELDS.has(field))
    if (isOtherAir && since === 'now') await keepFormerAir(place, formerFans, now)
    if (isOtherAir && since !== 'now') await markMeasuredInOtherAir(placeId, now)
    await place.update({ ...columns, airFactor })
    await stopBeingDemo(place, member)
    await FanHours.destroy({ where: { placeId } })
    await FanHours.bulkCreate(fans.map((row) => ({ ...row, placeId })))
    await addFoundryEvent(
      { type: 'place', id: placeId, name: input.name },
      {
        kind: 'place changed',
        by: member,
        at: now,
        text: changeText(input.name, isOtherAir ? since : null, 'name' in changed.after),
        ...changed,
      },
    )
  })
}

/**
 * Retires a place: nobody can choose it any more, and what hung there keeps it in its log.
 *
 * @throws {AppError} not_found; conflict while trees hang there, or when it is retired already.
 */
export function retirePlace(placeId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const now = clock.now()
    const place = await placeInUse(placeId)
    const tags = (await hangingTrees()).get(placeId) ?? []
    if (tags.length > 0) {
      const [verb, them] = tags.length === 1 ? ['hangs', 'it'] : ['hang', 'them']
      throw new AppError('conflict', `${nameList(tags)} ${verb} at ${place.name}. Move ${them} first.`)
    }
    await place.update({ retiredAt: now })
    await stopBeingDemo(place, member)
    await addFoundryEvent(
      { type: 'place', id: placeId, name: place.name },
      { kind: 'place retired', by: member, at: now, text: `Place ${place.name} retired.` },
    )
  })
}

/**
 * Takes a retired place into use again, as it was.
 *
 * @throws {AppError} not_found; conflict while its sensor is retired. Without effect when it is in use.
 */
export function reusePlace(placeId: string, { member, clock }: By): Promise<void> {
  return inTransaction(async () => {
    const place = await Place.findByPk(placeId, { include: 'sensor' })
    if (!place) throw new AppError('not_found', 'There is no such place.')
    if (place.retiredAt === null) return
    if (!place.sensor || place.sensor.retiredAt !== null) {
      throw new AppError('conflict', `Its sensor, ${place.sensor?.name ?? 'unknown'}, is retired. Take that into use again first.`)
    }
    await place.update({ retiredAt: null })
    await stopBeingDemo(place, member)
    await addFoundryEvent(
      { type: 'place', id: placeId, name: place.name },
      { kind: 'place in use again', by: member, at: clock.now(), text: `Place ${place.name} taken into use again.` },
    )
  })
}

/** Of a place in the history: what says nothing of how its air is. */
const NO_AIR_FIELDS: ReadonlySet<string> = new Set(['name', 'airMeasuredOn', 'airMeasuredWith', 'airMeasuredBy'])

function changeText(name: string, since: AirSince | null, isRenamed: boolean): string {
  if (since === null) return isRenamed ? `Place ${name} renamed.` : `Place ${name}: how its air speeds are known.`
  return since === 'now' ? `Place ${name} changed, from now on.` : `Place ${name} corrected; what hangs there was worked out again.`
}

type Speeds = Pick<Air, 'airSpeedFansOnMps' | 'airSpeedFansOffMps' | 'fanDuty'>

const isOtherSpeed = (one: Speeds, other: Speeds): boolean =>
  one.airSpeedFansOnMps !== other.airSpeedFansOnMps || one.airSpeedFansOffMps !== other.airSpeedFansOffMps || one.fanDuty !== other.fanDuty

/** Keeps the air that a place has had until an instant, so that what has dried in it stays as it is. Takes part in the caller's transaction. */
export async function keepFormerAir(place: Place, fans: readonly Fans[], until: number): Promise<void> {
  const { airSpeedFansOnMps, airSpeedFansOffMps, fanDuty, airFactor, sensorId } = place
  const fanHours = fans.map(({ weekday, onMinute, offMinute }) => ({ weekday, onMinute, offMinute }))
  const air = { airSpeedFansOnMps, airSpeedFansOffMps, fanDuty, airFactor, sensorId, fanHours }
  await FormerAir.create({ id: newId(until), placeId: place.id, until, ...air })
}

async function placeInUse(placeId: string): Promise<Place> {
  const place = await Place.findByPk(placeId)
  if (!place) throw new AppError('not_found', 'There is no such place.')
  if (place.retiredAt !== null) throw new AppError('conflict', `${place.name} is retired.`)
  return place
}

async function requireSensor(sensorId: number): Promise<Sensor> {
  const sensor = await Sensor.findByPk(sensorId)
  if (!sensor || sensor.retiredAt !== null) refuseField('sensorId', 'Choose a sensor that is in use.')
  return sensor
}

/** @throws {AppError} conflict with `fields` for a day that has not come yet in the foundry's zone. */
async function requirePastDay(day: string | null, now: number): Promise<void> {
  if (day === null) return
  const { timeZone } = await Foundry.findByPk(1, { rejectOnEmpty: true })
  if (day > localDay(now, timeZone)) refuseField('airMeasuredOn', 'This day has not come yet.')
}

type Air = AirMeasured & { name: string; airSpeedFansOnMps: number; airSpeedFansOffMps: number; fanDuty: number }

/** A place as the history tells it. */
function inWords(air: Air, fans: readonly Fans[], sensor: string) {
  // A row keeps its columns behind getters, which a spread would not see.
  const { name, airSpeedFansOnMps, airSpeedFansOffMps, fanDuty, airMeasuredOn, airMeasuredWith, airMeasuredBy } = air
  const spans = fans.map(({ weekday, onMinute, offMinute }) => ({ weekday, fromMinute: onMinute, toMinute: offMinute }))
  return {
    name,
    airSpeedFansOnMps,
    airSpeedFansOffMps,
    fanDutyPct: fanDuty * 100,
    airMeasuredOn,
    airMeasuredWith,
    airMeasuredBy,
    sensor,
    fans: weekWords(spans, 'never on'),
  }
}
