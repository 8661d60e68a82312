import { millisecondsInMinute } from 'date-fns/constants'
import { chillFlag, DEFAULT_FLAG_LIMITS } from '@/lib/drying/flags'
import { roomFactor, wetBulbDepressionK } from '@/lib/drying/room-factor'
import { formatMoment } from '@/lib/format/local-time'
import { formatKelvin, formatTemperature, oneDecimal, wholeNumber, type TempUnit } from '@/lib/format/units'
import type { QueueRoom } from '@/lib/queue/contract'
import { isNearWax, steadyTempsC, type LimitedCoat } from '@/lib/room/limits'
import { roughDuration } from '@/lib/format/duration'
import { LOWEST_TARGET_PCT, type Dryer, type FansOn, type Tonight, type TreeEffect } from '@/lib/room/tonight'

/** One thing to do about the air, and why. */
export type Thing = { title: string; text: string }

/** A measure that brings less than this together is not worth a walk. */
export const LEAST_GAIN_MS = 30 * millisecondsInMinute

const MOST_THINGS = 3

type ThingsInput = {
  rooms: readonly QueueRoom[]
  effects: readonly TreeEffect[]
  dryer: Dryer | null
  /** Places whose fans would help, with what all their trees gain, most first. */
  fans: readonly { fansOn: FansOn; gainMs: number }[]
  sensorOf: (effect: TreeEffect) => number | undefined
  /** Every shell with wax in it that hangs in a room's air, dry ones too. */
  coatsOf: (sensorId: number) => readonly LimitedCoat[]
  /** The highest place factor of where a tree hangs, until the next opening. */
  placeFactorOf: (effect: TreeEffect) => number
  tonight: Tonight
  now: number
  timeZone: string
  tempUnit: TempUnit
  pressurePa: number
}

/**
 * Up to three things to do about the air, gravest first: what nobody reads, what harms the wax, then what wins hours. Each rests on
 * what is known of this room; none breaks a limit of heat, swing or chill while wax is in the shells.
 */
export function thingsToDo(input: ThingsInput): Thing[] {
  return [
    ...silentRooms(input),
    ...hotRooms(input),
    ...dryRooms(input),
    ...dryerThing(input),
    ...fansThing(input),
    ...holdThing(input),
  ].slice(0, MOST_THINGS)
}

const tags = (effects: readonly TreeEffect[]): string => {
  const all = effects.map((effect) => effect.tree.facts.tag)
  const shown = all.slice(0, 3)
  if (all.length > shown.length) return `${shown.join(', ')} and ${all.length - shown.length} more`
  return shown.length > 1 ? `${shown.slice(0, -1).join(', ')} and ${shown.at(-1)}` : (shown[0] ?? '')
}

const inRoom = ({ effects, sensorOf }: ThingsInput, sensorId: number) => effects.filter((effect) => sensorOf(effect) === sensorId)

/** Coats that lie close to the wax. */
const nearWax = (effects: readonly TreeEffect[]) => effects.filter((effect) => isNearWax(effect.tree.newest.number))

const isSilent = (room: QueueRoom) => room.isStale || room.measuredAt === null

function silentRooms(input: ThingsInput): Thing[] {
  return input.rooms.flatMap((room): Thing[] => {
    const unknown = inRoom(input, room.sensorId).filter((effect) => effect.tree.call.isUnknown)
    if (!isSilent(room) || unknown.length === 0) return []
    const since =
      room.measuredAt === null ? 'It has never been read' : `No reading since ${formatMoment(room.measuredAt, input.now, input.timeZone)}`
    const text = `${since}: ${tags(unknown)} ${unknown.length === 1 ? 'is' : 'are'} unknown until one comes.`
    return [{ title: room.isTypedOnly ? `Read the ${room.sensorName}` : `Check the ${room.sensorName}`, text }]
  })
}

function hotRooms({ rooms, tempUnit }: ThingsInput): Thing[] {
  return rooms.flatMap((room): Thing[] => {
    if (isSilent(room) || room.airTempC === null || room.airTempC <= DEFAULT_FLAG_LIMITS.heatC) return []
    return [
      {
        title: `Cool the room under ${formatTemperature(DEFAULT_FLAG_LIMITS.heatC, tempUnit)}`,
        text: `${room.sensorName} reads ${formatTemperature(room.airTempC, tempUnit)}: wax grows and cracks the shell around it.`,
      },
    ]
  })
}

function dryRooms(input: ThingsInput): Thing[] {
  return input.rooms.flatMap((room): Thing[] => {
    const wet = nearWax(inRoom(input, room.sensorId)).filter((effect) => !effect.tree.call.isUnknown)
    if (isSilent(room) || room.airTempC === null || room.pull !== 'too dry for face coats' || wet.length === 0) return []
    const targetPct = mildHumidityPct(room.airTempC, Math.max(...wet.map(input.placeFactorOf)), input.pressurePa)
    if (targetPct === null) return []
    const why = `the wet bulb lies ${formatKelvin(room.wetBulbGapK, input.tempUnit)} under the room and chills the wax of ${tags(wet)}.`
    return [{ title: `Raise the humidity to ${wholeNumber(targetPct)} % RH`, text: `At ${wholeNumber(room.relHumidityPct ?? 0)} % ${why}` }]
  })
}

/** The lowest humidity, in fives, at which an air of this temperature does a face coat in this place no harm; null where none does. */
export function mildHumidityPct(airTempC: number, placeFactor: number, pressurePa: number): number | null {
  for (let relHumidityPct = LOWEST_TARGET_PCT; relHumidityPct <= 75; relHumidityPct += 5) {
    const air = { airTempC, relHumidityPct }
    const chill = { wetBulbDepressionK: wetBulbDepressionK(air, pressurePa), roomFactor: roomFactor(air, pressurePa), placeFactor }
    if (chillFlag({ coatNumber: 1, ...chill }) === null) return relHumidityPct
  }
  return null
}

const until = ({ tonight, now, timeZone }: ThingsInput) => `until ${formatMoment(tonight.to, now, timeZone)}`

function dryerThing(input: ThingsInput): Thing[] {
  const { dryer, rooms, effects } = input
  if (!dryer) return []
  const wonMs = effects.reduce((sum, effect) => sum + (effect.wonBackMs ?? 0), 0)
  const room = rooms.find((candidate) => candidate.sensorId === dryer.sensorId)
  const face = nearWax(inRoom(input, dryer.sensorId))
  const floor =
    face.length === 0 ? '' : ` Not under ${LOWEST_TARGET_PCT} %: ${tags(face)} ${face.length === 1 ? 'is a face coat' : 'are face coats'}.`
  const where = rooms.length > 1 && room ? `${room.sensorName}: ` : ''
  return [
    {
      title: `${where}dry the air to ${dryer.targetPct} % RH ${until(input)}`.replace(/^./, (first) => first.toUpperCase()),
      text: `With a dehumidifier, not with heat. ${roughDuration(wonMs)} come back.${floor}`,
    },
  ]
}

function fansThing(input: ThingsInput): Thing[] {
  const [best] = input.fans
  if (!best || best.gainMs < LEAST_GAIN_MS) return []
  const { place } = best.fansOn
  return [
    {
      title: `Leave the fans on at ${place.name} ${until(input)}`,
      text: `${oneDecimal(place.airSpeedFansOnMps)} m/s instead of ${oneDecimal(place.airSpeedFansOffMps)} m/s: ${roughDuration(best.gainMs)} come back.`,
    },
  ]
}

function holdThing(input: ThingsInput): Thing[] {
  const { swingK } = DEFAULT_FLAG_LIMITS
  const shown = (celsius: number) => formatTemperature(celsius, input.tempUnit)
  return input.rooms.flatMap((room): Thing[] => {
    const wet = nearWax(inRoom(input, room.sensorId)).filter((effect) => !effect.tree.call.isUnknown)
    const steady = steadyTempsC(input.coatsOf(room.sensorId))
    if (isSilent(room) || wet.length === 0 || steady === null) return []
    const { lowC, highC } = steady
    const isOneDip = Math.abs(highC - lowC - 2 * swingK) < 0.05
    return [
      {
        title: isOneDip
          ? `Hold the room within ${formatKelvin(swingK, input.tempUnit)} of ${shown((lowC + highC) / 2)}`
          : `Hold the room between ${shown(lowC)} and ${shown(highC)}`,
        text: `Wax moves under a wet face coat and lifts it: ${tags(wet)}.`,
      },
    ]
  })
}
