import type { RecessClass } from '@/lib/coats/vocabulary'
import { stationPressurePa } from '@/lib/drying/air'
import { notSetUp } from '@/lib/core/errors'
import type { FanHours } from '@/lib/drying/types'
import type { Units } from '@/lib/format/units'
import { loadRecessFactors } from '@/lib/queries/recess-factors'
import type { WorkCalendar } from '@/lib/schedule/shifts'
import type { PlaceFacts } from '@/lib/trees/facts'
import { Closure, FanHours as FanHoursRow, FormerAir, Foundry, Member, Place, Sensor, ShiftHours } from '@/models'

/** The foundry's settings and places: a few dozen rows that change once a month. */
export type FoundryFacts = {
  name: string
  timeZone: string
  altitudeM: number
  pressurePa: number
  /** The whole foundry is the demo; where only some data is, its rows are marked. */
  isDemo: boolean
  /** There are rows of the demo: in a foundry that is the demo, or laid over another. */
  hasDemoData: boolean
  units: Units
  /** The room that the recipes were made for, °C and %. */
  band: { lowTempC: number; highTempC: number; lowRhPct: number; highRhPct: number }
  calendar: WorkCalendar
  /** Retired ones too: a coat may have dried there. Whoever offers places leaves those out. */
  places: PlaceFacts[]
  recessFactors: Record<RecessClass, number>
  /** In use. */
  sensors: { id: number; name: string; kind: 'logger' | 'wall hygrometer' }[]
}

/** @throws {AppError} unavailable when nobody has set up a foundry yet. */
export async function loadFoundry(): Promise<FoundryFacts> {
  const [foundry, hours, closures, places, fanHours, formerAirs, sensors, recessFactors, demoPeople] = await Promise.all([
    Foundry.findByPk(1),
    ShiftHours.findAll({ order: [['weekday', 'ASC']] }),
    Closure.findAll({ order: [['firstDay', 'ASC']] }),
    Place.findAll({ order: [['name', 'ASC']] }),
    FanHoursRow.findAll(),
    FormerAir.findAll({ order: [['until', 'ASC']] }),
    Sensor.findAll({ order: [['id', 'ASC']] }),
    loadRecessFactors(),
    // They come first and go last.
    Member.count({ where: { isDemo: true } }),
  ])
  if (!foundry) throw notSetUp()
  const kindOf = new Map(sensors.map((sensor) => [sensor.id, sensor.kind]))
  const fansOf = (placeId: string): FanHours[] =>
    fanHours.filter((row) => row.placeId === placeId).map(({ weekday, onMinute, offMinute }) => ({ weekday, onMinute, offMinute }))
  return {
    name: foundry.name,
    timeZone: foundry.timeZone,
    altitudeM: foundry.altitudeM,
    pressurePa: stationPressurePa(foundry.altitudeM),
    isDemo: foundry.isDemo,
    hasDemoData: demoPeople > 0,
    units: { temp: foundry.tempUnit, mass: foundry.massUnit, length: foundry.lengthUnit },
    band: {
      lowTempC: foundry.bandLowTempC,
      highTempC: foundry.bandHighTempC,
      lowRhPct: foundry.bandLowRhPct,
      highRhPct: foundry.bandHighRhPct,
    },
    calendar: {
      hours: hours.map(({ weekday, opensMinute, closesMinute }) => ({ weekday, opensMinute, closesMinute })),
      closures: closures.map(({ firstDay, lastDay }) => ({ firstDay, lastDay })),
    },
    recessFactors,
    places: places.map((place) => ({
      id: place.id,
      name: place.name,
      sensorId: place.sensorId,
      isRetired: place.retiredAt !== null,
      isTypedOnly: kindOf.get(place.sensorId) === 'wall hygrometer',
      airSpeedFansOnMps: place.airSpeedFansOnMps,
      airSpeedFansOffMps: place.airSpeedFansOffMps,
      fanDuty: place.fanDuty,
      airFactor: place.airFactor,
      fanHours: fansOf(place.id),
      formerAirs: formerAirs
        .filter((air) => air.placeId === place.id)
        .map(({ until, sensorId, airSpeedFansOnMps, airSpeedFansOffMps, fanDuty, airFactor, fanHours: fans }) => ({
          until,
          sensorId,
          airSpeedFansOnMps,
          airSpeedFansOffMps,
          fanDuty,
          airFactor,
          fanHours: fans,
        })),
    })),
    sensors: sensors.filter((sensor) => sensor.retiredAt === null).map(({ id, name, kind }) => ({ id, name, kind })),
  }
}
