import type { FanHours as Fans } from '@/lib/drying/types'
import { hangingTrees } from '@/lib/queries/hanging-trees'
import { FanHours, Foundry, Place, Sensor } from '@/models'

export type PlaceRow = {
  id: string
  name: string
  /** Demo data in a foundry that is not the demo itself. */
  isDemo: boolean
  airSpeedFansOnMps: number
  airSpeedFansOffMps: number
  fanHours: Fans[]
  sensor: { id: number; name: string }
  /** Tags of the trees that hang there now. */
  trees: string[]
  retiredAt: number | null
}

export type PlaceList = { inUse: PlaceRow[]; retired: PlaceRow[]; sensors: { id: number; name: string }[] }

/** The places, and the sensors in use that can serve them. */
export async function loadPlaceList(): Promise<PlaceList> {
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
  }
}
