import type { TempUnit } from '@/lib/format/units'
import { hasMonthName, readMoment } from '@/lib/uploads/read-moment'
import { readNumber } from '@/lib/uploads/read-number'
import {
  DATE_FORMS,
  DELIMITERS,
  MOST_COLUMNS,
  MOST_LINES_BEFORE,
  type DateForm,
  type Delimiter,
  type Encoding,
  type UploadSettings,
} from '@/lib/uploads/upload-settings'

const LINES_LOOKED_AT = 400
/** A share of the rows that has to agree; loggers write lines of events between their rows. */
const MOST = 0.6
/** A channel may have been unplugged for a while. */
const SOME = 0.3

const withoutQuoted = (line: string) => line.replaceAll(/"[^"]*"/g, '""')

/** How often each count of a separator occurs, and the share of lines with the commonest count above none. */
function consistency(lines: readonly string[], delimiter: string): number {
  const counts = new Map<number, number>()
  for (const line of lines) {
    const count = withoutQuoted(line).split(delimiter).length - 1
    if (count > 0) counts.set(count, (counts.get(count) ?? 0) + 1)
  }
  return Math.max(0, ...counts.values()) / Math.max(1, lines.length)
}

/** What stands between the columns. A comma only where neither of the others does: it may be a decimal comma. */
export function guessDelimiter(lines: readonly string[]): Delimiter {
  const looked = lines.filter((line) => line.trim() !== '').slice(0, LINES_LOOKED_AT)
  const shares = DELIMITERS.map((delimiter) => ({ delimiter, share: consistency(looked, delimiter) }))
  const [best = { delimiter: ',' as const, share: 0 }] = shares
    .filter(({ delimiter }) => delimiter !== ',')
    .toSorted((one, other) => other.share - one.share)
  return best.share >= MOST || best.share > consistency(looked, ',') ? best.delimiter : ','
}

const DECIMAL_COMMA = /^[+-]?\d+,\d+(?:\s*[°%a-z]+)*$/i
const DECIMAL_POINT = /^[+-]?\d+\.\d+(?:\s*[°%a-z]+)*$/i

/** Whether numbers are written with a decimal comma. */
export function guessDecimalComma(rows: readonly (readonly string[])[]): boolean {
  const cells = rows.slice(0, LINES_LOOKED_AT).flat()
  const having = (pattern: RegExp) => cells.filter((cell) => pattern.test(cell.trim())).length
  return having(DECIMAL_COMMA) > having(DECIMAL_POINT)
}

export type DateGuess = {
  form: DateForm | null
  /** Both readings fit every date that was looked at, so a person has to say which is meant. */
  isAmbiguous: boolean
}

/**
 * In which order dates are written: the form that reads the most of them. Where day and month could be either, it says so and
 * chooses none.
 *
 * @param texts dates, or dates with their clock, of as many different days as there are.
 * @param clocks the clocks beside them where those have a column of their own.
 */
export function guessDateForm(texts: readonly string[], clocks: readonly (string | null)[] = []): DateGuess {
  const readable = DATE_FORMS.map((form) => ({
    form,
    count: texts.filter((text, index) => readMoment(text, clocks[index] ?? null, form) !== null).length,
  }))
  const most = Math.max(...readable.map(({ count }) => count))
  if (most === 0) return { form: null, isAmbiguous: false }
  const fits = readable.filter(({ count }) => count === most).map(({ form }) => form)
  const numeric = texts.filter((text) => !hasMonthName(text))
  const isAmbiguous = fits.includes('dmy') && fits.includes('mdy') && numeric.length > 0
  return isAmbiguous ? { form: null, isAmbiguous } : { form: fits[0] ?? null, isAmbiguous: false }
}

const isClock = (cell: string) => /^\d{1,2}[:.]\d{2}/.test(cell.trim()) && readMoment('2020-01-01', cell, 'ymd') !== null
const isDated = (cell: string, clock: string | null) => DATE_FORMS.some((form) => readMoment(cell, clock, form) !== null)
const isWhole = (cell: string) => isDated(cell, null)
const isDateAlone = (cell: string) => !isWhole(cell) && isDated(cell, '00:00')
const isNumber = (cell: string) => [true, false].some((comma) => Number.isFinite(readNumber(cell, comma) ?? Number.NaN))

/** Whether a row of cells looks like data: a time in it, and a number beside it. */
function isData(cells: readonly string[]): boolean {
  const timed = cells.findIndex((cell) => isWhole(cell) || isDateAlone(cell))
  return timed >= 0 && cells.some((cell, index) => index !== timed && !isClock(cell) && isNumber(cell))
}

/** How many lines stand before the first row of data. */
export function guessLinesBefore(rows: readonly (readonly string[])[]): number {
  const first = rows.slice(0, MOST_LINES_BEFORE).findIndex((cells) => isData(cells))
  return Math.max(0, first)
}

const NAMES = {
  humidity: /r\.?\s?h\b|hum|feucht|r\.?\s?f\b|umid|humed|%/i,
  temperature: /temp|°|º|celsius|fahrenheit|\bdeg|^t\b|^t[_ ]?(?:in|air|amb|1)?$|\(c\)|\(f\)/i,
  pressure: /press|druck|baro|hpa|mbar|\bpa\b|pression/i,
  /** Worked out by the logger, or not of the air. */
  other: /dew|tau|ros[ée]e|roc[íi]o|wet|feuchtkugel|surface|oberfl|max|min\b|abs|batt|volt|enthal|mixing/i,
} as const

export type ColumnGuess = Pick<
  UploadSettings,
  'dateColumn' | 'clockColumn' | 'tempColumn' | 'tempUnit' | 'humidityColumn' | 'pressureColumn' | 'pressureUnit'
>

/** Numbers of a column, without those that are none. */
function numbersOf(rows: readonly (readonly string[])[], column: number, hasDecimalComma: boolean): number[] {
  return rows.map((cells) => readNumber(cells[column] ?? '', hasDecimalComma) ?? Number.NaN).filter((value) => Number.isFinite(value))
}

const middleOf = (values: readonly number[]) => values.toSorted((one, other) => one - other)[values.length >> 1] ?? Number.NaN

/** 1, 2, 3: the number of the row and no reading. */
const isCounter = (values: readonly number[]) =>
  values.length > 2 && values.every((value, index) => index === 0 || value - (values[index - 1] ?? 0) === 1)

/** No shell room is as warm as this in °C, and none as cold in °F. */
const WARMEST_C = 45

/**
 * Which column is which, by the names above them and else by what stands in them: the first number is taken for the temperature,
 * the second for the humidity.
 *
 * @param names of the columns, from the line over the data; empty where there is none.
 */
export function guessColumns(
  rows: readonly (readonly string[])[],
  names: readonly string[],
  { hasDecimalComma, preamble = '' }: { hasDecimalComma: boolean; preamble?: string },
): ColumnGuess {
  const width = Math.min(MOST_COLUMNS, Math.max(1, ...rows.map((cells) => cells.length)))
  const columns = Array.from({ length: width }, (_, index) => index)
  const share = (column: number, fits: (cell: string) => boolean) =>
    rows.filter((cells) => fits(cells[column] ?? '')).length / Math.max(1, rows.length)
  const whole = columns.find((column) => share(column, isWhole) >= MOST)
  const dateColumn = whole ?? columns.find((column) => share(column, isDateAlone) >= MOST) ?? 0
  const clockColumn =
    whole === undefined ? (columns.find((column) => column !== dateColumn && share(column, isClock) >= MOST) ?? null) : null
  const numeric = columns
    .filter((column) => column !== dateColumn && column !== clockColumn && share(column, isNumber) >= SOME)
    .map((column) => ({ column, name: names[column] ?? '', values: numbersOf(rows, column, hasDecimalComma) }))
    .filter(({ values, name }) => !isCounter(values) || NAMES.temperature.test(name) || NAMES.humidity.test(name))
  const named = (pattern: RegExp) =>
    numeric.find(({ name }) => pattern.test(name) && !NAMES.other.test(name)) ?? numeric.find(({ name }) => pattern.test(name))
  // 'Temp/RH (%)' is the humidity: its sign decides before the words.
  const humidity = named(NAMES.humidity)
  const temperature = numeric.find(
    ({ column, name }) => column !== humidity?.column && NAMES.temperature.test(name) && !NAMES.other.test(name),
  )
  const pressure = numeric.find(
    ({ column, name }) => column !== humidity?.column && column !== temperature?.column && NAMES.pressure.test(name),
  )
  const free = numeric.filter(({ column }) => ![humidity?.column, temperature?.column, pressure?.column].includes(column))
  const tempColumn = temperature ?? free.shift()
  const humidityColumn = humidity ?? free.shift()
  return {
    dateColumn,
    clockColumn,
    tempColumn: tempColumn?.column ?? freeColumn(columns, [dateColumn, clockColumn]),
    tempUnit: guessTempUnit(
      tempColumn?.name ?? '',
      preamble,
      rows.map((cells) => cells[tempColumn?.column ?? -1] ?? ''),
      tempColumn?.values ?? [],
    ),
    humidityColumn: humidityColumn?.column ?? freeColumn(columns, [dateColumn, clockColumn, tempColumn?.column ?? null], 1),
    pressureColumn: pressure?.column ?? null,
    pressureUnit: middleOf(pressure?.values ?? []) > 5000 ? 'Pa' : 'hPa',
  }
}

/** Some column that is not taken, for a file that has too few: the person sees at once that it does not fit. */
function freeColumn(columns: readonly number[], taken: readonly (number | null)[], skip = 0): number {
  return columns.filter((column) => !taken.includes(column))[skip] ?? columns.length + skip
}

const CELSIUS = /°\s?c|º\s?c|deg\.?\s?c|celsius|[([]\s?c\s?[)\]]|\d\s?c$/i
const FAHRENHEIT = /°\s?f|º\s?f|deg\.?\s?f|fahrenheit|[([]\s?f\s?[)\]]|\d\s?f$/i

/** By the name of the column, by a unit in its cells, by the lines before it, and else by the values. */
function guessTempUnit(name: string, preamble: string, cells: readonly string[], values: readonly number[]): TempUnit {
  for (const text of [name, cells.find((cell) => cell.trim() !== '') ?? '', preamble]) {
    const [isC, isF] = [CELSIUS.test(text), FAHRENHEIT.test(text)]
    if (isC !== isF) return isF ? 'degF' : 'degC'
  }
  return middleOf(values) > WARMEST_C ? 'degF' : 'degC'
}

const NAMED_OFFSET = /(?:UTC|GMT)\s?([+-])(\d{1,2})(?::?(\d{2}))?/i

/**
 * Zone of the times: as each row says where they do; a fixed offset that the lines before the data name; UTC where a name says so; else
 * the foundry's.
 */
export function guessZone(
  times: readonly { date: string; clock: string | null }[],
  form: DateForm | null,
  preamble: string,
): UploadSettings['zone'] {
  const forms = form === null ? DATE_FORMS : [form]
  const moments = times.flatMap(
    ({ date, clock }) => forms.map((each) => readMoment(date, clock, each)).find((moment) => moment !== null) ?? [],
  )
  if (moments.length > 0 && moments.every(({ offsetMinutes }) => offsetMinutes !== null)) return form?.startsWith('epoch') ? 'UTC' : 'rows'
  const [, sign, hours = '', minutes = '00'] = NAMED_OFFSET.exec(preamble) ?? []
  if (sign !== undefined && Number(hours) <= 14) {
    return Number(hours) + Number(minutes) === 0 ? 'UTC' : `${sign}${hours.padStart(2, '0')}:${minutes}`
  }
  return /\b(?:UTC|GMT)\b/i.test(preamble) ? 'UTC' : 'foundry'
}

export type SettingsGuess = { settings: UploadSettings; isDateAmbiguous: boolean }

/**
 * How a file seems to be written.
 *
 * @param rows cells of the first lines, one entry a line, blank lines too.
 * @param spread rows from all over the file, so that days past the twelfth are among them.
 */
export function guessSettings(
  rows: readonly (readonly string[])[],
  spread: readonly (readonly string[])[],
  { encoding, delimiter }: { encoding: Encoding; delimiter: Delimiter },
): SettingsGuess {
  const linesBefore = guessLinesBefore(rows)
  const data = rows
    .slice(linesBefore)
    .filter((cells) => cells.some((cell) => cell.trim() !== ''))
    .slice(0, LINES_LOOKED_AT)
  const preamble = rows.slice(0, linesBefore).flat().join(' ')
  const hasDecimalComma = guessDecimalComma(data)
  const columns = guessColumns(data, namesOf(rows, linesBefore), { hasDecimalComma, preamble })
  const times = timesOf([...data, ...spread], columns)
  const { form, isAmbiguous } = guessDateForm(
    times.map(({ date }) => date),
    times.map(({ clock }) => clock),
  )
  const zone = guessZone(timesOf(data, columns), form, preamble)
  return { settings: { encoding, delimiter, hasDecimalComma, linesBefore, ...columns, dateForm: form, zone }, isDateAmbiguous: isAmbiguous }
}

/** The cells of the times, of rows that have some. */
export function timesOf(
  rows: readonly (readonly string[])[],
  { dateColumn, clockColumn }: Pick<UploadSettings, 'dateColumn' | 'clockColumn'>,
): { date: string; clock: string | null }[] {
  return rows
    .map((cells) => ({ date: cells[dateColumn] ?? '', clock: clockColumn === null ? null : (cells[clockColumn] ?? '') }))
    .filter(({ date }) => date.trim() !== '')
}

const filled = (cells: readonly string[]) => cells.filter((cell) => cell.trim() !== '').length

/**
 * Names of the columns: the last line before the data with more than one cell; a line of units under it is joined to it.
 *
 * @returns an empty list where the data has no names over it.
 */
export function namesOf(rows: readonly (readonly string[])[], linesBefore: number): string[] {
  const above = rows.slice(0, linesBefore).filter((cells) => filled(cells) > 0)
  const last = above.at(-1)
  if (!last || filled(last) < 2) return []
  const over = above.at(-2)
  const isUnits = last.every(
    (cell) =>
      cell.trim() === '' || /^[[(]?(?:°?[CF]|deg\s?[CF]|%|%\s?r\.?h\.?|r\.?h\.?|hpa|pa|mbar|[ymdhs:/.\s-]+)[\])]?$/i.test(cell.trim()),
  )
  if (!isUnits || !over || filled(over) < 2) return last.map((cell) => cell.trim())
  return last.map((cell, index) =>
    [over[index] ?? '', cell]
      .map((part) => part.trim())
      .filter(Boolean)
      .join(' '),
  )
}
