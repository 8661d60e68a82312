import { millisecondsInMinute } from 'date-fns/constants'
import { toSi } from '@/lib/format/units'
import { FUTURE_LIMIT_MS } from '@/lib/room/check-rows'
import { isWithinRange, REASON_SENTENCES } from '@/lib/room/reading-marks'
import { readMoment, readOffset } from '@/lib/uploads/read-moment'
import { readNumber } from '@/lib/uploads/read-number'
import type { RowOrder, UploadSettings } from '@/lib/uploads/upload-settings'
import { inOrder, instantsOf } from '@/lib/uploads/wall-clock'

/** One good row, in SI. */
export type UploadedRow = { measuredAt: number; airTempC: number; relHumidityPct: number; pressurePa?: number }
/** A reading, with the reason where it is kept and not counted; or none, with the reason. */
export type RowOutcome = { row: UploadedRow; reason: string | null } | { row: null; reason: string }

export type RowContext = {
  settings: UploadSettings
  /** The foundry's. */
  timeZone: string
  order: RowOrder
  /** Instant of the good row before; null before the first. */
  lastAt: number | null
  now: number
}

/**
 * Loggers whose battery was changed begin again at 1970, 1980 or 2000: such a row says nothing about when it was measured, and would
 * tie this year to that one by a gap of decades. Our own limit.
 */
const NO_CLOCK_BEFORE = Date.UTC(2000, 0, 3)

const PRESSURE_LIMITS_PA = { least: 50_000, most: 110_000 }

/** Finer than any sensor, so that 70 °F is not kept as 21.11111111111111 °C. */
const CELSIUS_DECIMALS = 1000

/**
 * One row of cells as a reading, or the reason why it is none.
 *
 * Units: °C, %, Pa and epoch milliseconds out, whatever the file has.
 */
export function readRow(cells: readonly string[], context: RowContext): RowOutcome {
  const { settings } = context
  const moment = measuredAtOf(cells, context)
  if (typeof moment === 'string') return { row: null, reason: moment }
  const temperature = numberOf(cells, settings.tempColumn, settings.hasDecimalComma, 'temperature')
  if (typeof temperature === 'string') return { row: null, reason: temperature }
  const airTempC =
    settings.tempUnit === 'degC' ? temperature : Math.round(toSi(temperature, settings.tempUnit) * CELSIUS_DECIMALS) / CELSIUS_DECIMALS
  const relHumidityPct = numberOf(cells, settings.humidityColumn, settings.hasDecimalComma, 'humidity')
  if (typeof relHumidityPct === 'string') return { row: null, reason: relHumidityPct }
  const row: UploadedRow = { measuredAt: moment, airTempC, relHumidityPct }
  if (settings.pressureColumn !== null && cellOf(cells, settings.pressureColumn) !== '') {
    const pressure = numberOf(cells, settings.pressureColumn, settings.hasDecimalComma, 'pressure')
    if (typeof pressure === 'string') return { row: null, reason: pressure }
    row.pressurePa = settings.pressureUnit === 'hPa' ? pressure * 100 : pressure
    if (row.pressurePa < PRESSURE_LIMITS_PA.least || row.pressurePa > PRESSURE_LIMITS_PA.most) {
      return { row: null, reason: `Air pressure lies between 500 and 1100 hPa. This row says ${cellOf(cells, settings.pressureColumn)}.` }
    }
  }
  return { row, reason: isWithinRange(row) ? null : `Kept, and not counted: ${REASON_SENTENCES['out of range']}` }
}

const LONGEST_SHOWN = 40

/** A cell as it is shown in a sentence. */
function cellOf(cells: readonly string[], column: number): string {
  return (cells[column] ?? '').trim().slice(0, LONGEST_SHOWN)
}

/** The number of a cell, or the reason why there is none. */
function numberOf(cells: readonly string[], column: number, hasDecimalComma: boolean, what: string): number | string {
  if (column >= cells.length) return `This row has only ${cells.length} ${cells.length === 1 ? 'column' : 'columns'}.`
  const number = readNumber(cells[column] ?? '', hasDecimalComma)
  if (number === null) return `No ${what} in this row.`
  return Number.isFinite(number) ? number : `The ${what} ‘${cellOf(cells, column)}’ is no number.`
}

function measuredAtOf(cells: readonly string[], { settings, timeZone, order, lastAt, now }: RowContext): number | string {
  const { dateColumn, clockColumn, dateForm, zone } = settings
  if (dateForm === null) return 'Choose first how the dates are written.'
  const written = [dateColumn, clockColumn]
    .flatMap((column) => (column === null ? [] : [cellOf(cells, column)]))
    .join(' ')
    .trim()
  if (written === '') return 'No time in this row.'
  const moment = readMoment(cells[dateColumn] ?? '', clockColumn === null ? null : (cells[clockColumn] ?? ''), dateForm)
  if (moment === null) return `The time ‘${written.trim()}’ cannot be read.`
  const at = instantOf(moment, { isEpoch: dateForm.startsWith('epoch'), zone, timeZone, order, lastAt })
  if (at === null && zone === 'rows') return `The time ‘${written}’ does not say its zone.`
  if (at === null) return `The time ‘${written}’ did not exist: the clocks were set forward.`
  if (at > now + FUTURE_LIMIT_MS) {
    return `The time ‘${written}’ lies ahead: the clock of the logger, the zone or the form of the dates is wrong.`
  }
  if (at < NO_CLOCK_BEFORE) return `The time ‘${written}’ lies before the year 2000: the clock of the logger was not set.`
  return at
}

function instantOf(
  { wallMs, offsetMinutes }: { wallMs: number; offsetMinutes: number | null },
  { isEpoch, zone, timeZone, order, lastAt }: { isEpoch: boolean; zone: string; timeZone: string; order: RowOrder; lastAt: number | null },
): number | null {
  if (isEpoch || zone === 'UTC') return wallMs
  if (zone === 'rows') return offsetMinutes === null ? null : wallMs - offsetMinutes * millisecondsInMinute
  if (zone !== 'foundry') return wallMs - readOffset(zone) * millisecondsInMinute
  const instants = instantsOf(wallMs, timeZone)
  return instants.length === 0 ? null : inOrder(instants, lastAt, order)
}
