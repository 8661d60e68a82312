import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { TZDate } from '@date-fns/tz'
import type { Clock } from '@/lib/core/clock'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadClimateRows, loadHours } from '@/lib/queries/load-climate'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { buildClimate } from '@/lib/room/climate'
import { climateColumns, climateFileRows, type ClimateColumn, type ClimateFileRow, type ClimateRange } from '@/lib/room/climate-csv'
import { BACK_HOURS, roomSeries } from '@/lib/room/series'
import { startOfLocalDay } from '@/lib/schedule/shifts'
import { Sensor } from '@/models'

const HISTORY_MS = 14 * millisecondsInDay

export type ClimateExport = { fileName: string; columns: ClimateColumn[]; rows: ClimateFileRow[] }

/** The hourly climate of one sensor as a table, a month at the most: what the page draws, or whole days. Null where there is no such sensor. */
export async function loadClimateExport(sensorId: number, range: ClimateRange, { clock }: { clock: Clock }): Promise<ClimateExport | null> {
  const [sensor, { timeZone, pressurePa }] = await Promise.all([Sensor.findByPk(sensorId), loadFoundry()])
  if (!sensor) return null
  const columns = climateColumns({ sensorName: sensor.name, temp: range.temp, timeZone })
  const named = sensor.name
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^-|-$/g, '')
  if (range.from !== undefined && range.to !== undefined) {
    const hours = await loadHours(sensorId, hourStartOf(startOfLocalDay(range.from, timeZone)), startOfDayAfter(range.to, timeZone))
    return { fileName: `climate-${named}-${range.from}-to-${range.to}.csv`, columns, rows: climateFileRows(hours, [], pressurePa) }
  }
  const now = clock.now()
  const rows = await loadClimateRows(sensorId, now - HISTORY_MS, now, [])
  const climate = buildClimate(rows, { now, timeZone })
  const drawn = rows.hours.filter((hour) => hour.hourStart > now - (BACK_HOURS + 1) * millisecondsInHour)
  const forecast = roomSeries(climate, [], { now, timeZone, pressurePa }).filter((point) => point.kind === 'forecast')
  return { fileName: `climate-${named}.csv`, columns, rows: climateFileRows(drawn, forecast, pressurePa) }
}

/** Local midnight after a day: 23 or 25 hours later where the clocks change. */
function startOfDayAfter(day: string, timeZone: string): number {
  const [year = 0, month = 1, date = 1] = day.split('-').map(Number)
  return new TZDate(year, month - 1, date + 1, 0, 0, 0, 0, timeZone).getTime()
}
