import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { TZDate } from '@date-fns/tz'
import type { Clock } from '@/lib/core/clock'
import { hourStartOf } from '@/lib/drying/dose-hours'
import { loadClimateSpans } from '@/lib/queries/climate-spans'
import { loadClimateRows, loadHours } from '@/lib/queries/load-climate'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { buildClimate } from '@/lib/room/climate'
import { climateColumns, climateFileRows, dayColumns, dayFileRows, type ClimateFileRow, type ClimateRange } from '@/lib/room/climate-csv'
import { rangeEnds, yearOfDays } from '@/lib/room/range'
import { BACK_HOURS, roomSeries } from '@/lib/room/series'
import { startOfLocalDay } from '@/lib/schedule/shifts'
import { Sensor } from '@/models'

const HISTORY_MS = 14 * millisecondsInDay

type Cell = string | number | null

/** One line an hour, or for a year one line a day; each row has its cells in the order of the columns. */
export type ClimateExport = { fileName: string; columns: { head: string; value: (row: readonly Cell[]) => Cell }[]; rows: Cell[][] }

function fileOf<Row>(name: string, columns: readonly { head: string; value: (row: Row) => Cell }[], rows: readonly Row[]): ClimateExport {
  return {
    fileName: `climate-${name}.csv`,
    columns: columns.map(({ head }, index) => ({ head, value: (row) => row[index] ?? null })),
    rows: rows.map((row) => columns.map(({ value }) => value(row))),
  }
}

/** The climate of one sensor as a table: what the page draws over a range, or the hours of whole days. Null where there is no such sensor. */
export async function loadClimateExport(sensorId: number, range: ClimateRange, { clock }: { clock: Clock }): Promise<ClimateExport | null> {
  const [sensor, { timeZone, pressurePa, band }] = await Promise.all([Sensor.findByPk(sensorId), loadFoundry()])
  if (!sensor) return null
  const format = { sensorName: sensor.name, temp: range.temp, timeZone }
  const named = sensor.name
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, '-')
    .replaceAll(/^-|-$/g, '')
  const byHour = (name: string, rows: readonly ClimateFileRow[]) => fileOf(name, climateColumns(format), rows)
  if (range.from !== undefined && range.to !== undefined) {
    const hours = await loadHours(sensorId, hourStartOf(startOfLocalDay(range.from, timeZone)), startOfDayAfter(range.to, timeZone))
    return byHour(`${named}-${range.from}-to-${range.to}`, climateFileRows(hours, [], pressurePa))
  }
  const now = clock.now()
  if (range.range === '1y') {
    const days = await loadClimateSpans(sensorId, yearOfDays(now, timeZone), band)
    return fileOf(`${named}-1y`, dayColumns(format), dayFileRows(days, pressurePa))
  }
  if (range.range === '14d') {
    const { from, to } = rangeEnds('14d', now, timeZone)
    return byHour(`${named}-14d`, climateFileRows(await loadHours(sensorId, hourStartOf(from), to), [], pressurePa))
  }
  const rows = await loadClimateRows(sensorId, now - HISTORY_MS, now, [])
  const climate = buildClimate(rows, { now, timeZone })
  const drawn = rows.hours.filter((hour) => hour.hourStart > now - (BACK_HOURS + 1) * millisecondsInHour)
  const forecast = roomSeries(climate, [], { now, timeZone, pressurePa }).filter((point) => point.kind === 'forecast')
  return byHour(named, climateFileRows(drawn, forecast, pressurePa))
}

/** Local midnight after a day: 23 or 25 hours later where the clocks change. */
function startOfDayAfter(day: string, timeZone: string): number {
  const [year = 0, month = 1, date = 1] = day.split('-').map(Number)
  return new TZDate(year, month - 1, date + 1, 0, 0, 0, 0, timeZone).getTime()
}
