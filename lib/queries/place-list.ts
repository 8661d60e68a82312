import type { Clock } from '@/lib/core/clock'
import type { FanHours as Fans } from '@/lib/drying/types'
import type { AirMeasured } from '@/lib/room/place-air'
import { localDay } from '@/lib/format/local-time'
import { hangingTrees } from '@/lib/queries/hanging-trees'
import { FanHours, Foundry, Place, Sensor } from '@/models'

export type PlaceRow = AirMeasured & {
  id: string
  name: string
  /** Demo data in a foundry that is not the demo itself. */
  isDemo: boolean
  airSpeedFansOnMps: number
  airSpeedFansOffMps: number
  fanDuty: number
  fanHours: Fans[]
  sensor: { id: number; name: string }
  /** Tags of the trees that hang there now. */
  trees: string[]
  retiredAt: number | null
}

export type PlaceList = {
  inUse: PlaceRow[]
  retired: PlaceRow[]
  sensors: { id: number; name: string }[]
  /** The foundry's local day. */
  today: string
}

/** The places, and the sensors in use that can serve them. */
export async function loadPlaceList({ clock }: { clock: Clock }): Promise<PlaceList> {
  const [foundry, places, fanHours, sensors, trees] = await Promise.all([
    Foundry.findByPk(1),
    Place.findAll({ include: 'sensor', order: [['name', 'ASC']] }),
    FanHours.findAll({
      order: [
        ['weekday', 'ASC'],
        ['onMinute', 'ASC'],
      ],
    }),
    Sensor.findAll({ where: { retiredAt: null }, order: [['name', 'ASC']] }),
    hangingTrees(),
  ])
  const rows = places.map((place): PlaceRow => ({
    id: place.id,
    isDemo: place.isDemo && foundry?.isDemo !== true,
    name: place.name,
    airSpeedFansOnMps: place.airSpeedFansOnMps,
    airSpeedFansOffMps: place.airSpeedFansOffMps,
    fanDuty: place.fanDuty,
    airMeasuredOn: place.airMeasuredOn,
    airMeasuredWith: place.airMeasuredWith,
    airMeasuredBy: place.airMeasuredBy,
    fanHours: fanHours
      .filter(({ placeId }) => placeId === place.id)
      .map(({ weekday, onMinute, offMinute }) => ({ weekday, onMinute, offMinute })),
    sensor: { id: place.sensorId, name: place.sensor?.name ?? '' },
    trees: trees.get(place.id) ?? [],
    retiredAt: place.retiredAt,
  }))
  return {
    inUse: rows.filter(({ retiredAt }) => retiredAt === null),
    retired: rows.filter(({ retiredAt }) => retiredAt !== null),
    sensors: sensors.map(({ id, name }) => ({ id, name })),
    today: localDay(clock.now(), foundry?.timeZone ?? 'UTC'),
  }
}
