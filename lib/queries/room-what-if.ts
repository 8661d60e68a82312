import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { loadFloor } from '@/lib/queries/floor'
import { weighAir } from '@/lib/room/room-what-if'
import type { RoomWhatIf, RoomWhatIfAnswer } from '@/lib/room/room-what-if-contract'
import { hasFansToLeaveOn } from '@/lib/room/tonight'

/**
 * What another air from now on would do to the trees in a room.
 *
 * Costs by the trees on the floor and the hours of a fortnight, never by the readings behind them.
 *
 * @throws {AppError} not_found where there is no such sensor in use; unprocessable where a place has no fans to leave on in this room.
 */
export async function loadRoomWhatIf(sensorId: number, choice: RoomWhatIf, { clock }: { clock: Clock }): Promise<RoomWhatIfAnswer> {
  const { foundry, context, trees } = await loadFloor({ now: clock.now(), trees: { on: 'floor' } })
  const climate = context.climates.get(sensorId)
  const isInUse = foundry.sensors.some((sensor) => sensor.id === sensorId)
  if (!climate || !isInUse) throw new AppError('not_found', 'There is no such sensor in use.')
  const places = foundry.places.filter((place) => place.sensorId === sensorId && !place.isRetired)
  for (const [index, placeId] of (choice.fansOnAt ?? []).entries()) {
    if (places.some((place) => place.id === placeId && hasFansToLeaveOn(place))) continue
    const message = 'This place is not in the room, or has no fans that its timetable switches off.'
    throw new AppError('unprocessable', message, { fields: [{ path: `fansOnAt.${index}`, message }] })
  }
  return weighAir({ context, trees, climate, places, hasHours: foundry.calendar.hours.length > 0 }, choice)
}
