import { z } from 'zod'
import { TEMP_UNITS } from '@/lib/format/units'

export const ENCODINGS = ['utf-8', 'utf-16le', 'latin1'] as const
export type Encoding = (typeof ENCODINGS)[number]

export const DELIMITERS = [',', ';', '\t'] as const
export type Delimiter = (typeof DELIMITERS)[number]

/** In which order a date is written, whatever stands between its parts; or seconds and milliseconds since 1970. */
export const DATE_FORMS = ['ymd', 'dmy', 'mdy', 'epoch s', 'epoch ms'] as const
export type DateForm = (typeof DATE_FORMS)[number]

export const PRESSURE_UNITS = ['hPa', 'Pa'] as const

/** More lines than any logger writes before its data. */
export const MOST_LINES_BEFORE = 200
export const MOST_COLUMNS = 60

/** 'rows': each time carries its own offset. A fixed offset is what a logger keeps that knows no summer time. */
const FIXED_OFFSET = /^[+-](?:0\d|1[0-4]):[0-5]\d$/
/** Every whole hour from the far west to the far east. */
export const FIXED_OFFSETS: readonly string[] = Array.from({ length: 27 }, (_, index) => {
  const hours = index - 12
  return `${hours < 0 ? '-' : '+'}${String(Math.abs(hours)).padStart(2, '0')}:00`
})

const zone = z
  .union([z.enum(['foundry', 'UTC', 'rows']), z.string().regex(FIXED_OFFSET)], 'Choose in which time zone the times are.')
  .describe('Zone of the times: the foundry’s, UTC, as each row says, or a fixed offset such as +01:00.')

const column = z
  .int('Choose a column.')
  .min(0, 'Choose a column.')
  .max(MOST_COLUMNS - 1, 'Choose a column.')

/**
 * How a file is to be read. Columns count from 0.
 *
 * `dateColumn` holds the whole time, or the date of one whose clock is in `clockColumn`. `dateForm` is null until somebody has chosen
 * between two readings of the same dates.
 */
export const uploadSettings = z
  .strictObject({
    encoding: z.enum(ENCODINGS, 'Choose a text encoding.'),
    delimiter: z.enum(DELIMITERS, 'Choose what stands between the columns.'),
    hasDecimalComma: z.boolean(),
    linesBefore: z
      .int('A whole number of lines.')
      .min(0, 'A whole number of lines, 0 or more.')
      .max(MOST_LINES_BEFORE, `At most ${MOST_LINES_BEFORE} lines.`)
      .describe('Lines before the first row of data; the names of the columns stand in the last of them.'),
    dateColumn: column,
    clockColumn: column.nullable(),
    dateForm: z.enum(DATE_FORMS).nullable(),
    zone,
    tempColumn: column,
    tempUnit: z.enum(TEMP_UNITS, 'Choose a unit.'),
    humidityColumn: column,
    pressureColumn: column.nullable(),
    pressureUnit: z.enum(PRESSURE_UNITS, 'Choose a unit.'),
  })
  .superRefine(({ dateColumn, clockColumn, tempColumn, humidityColumn, pressureColumn }, context) => {
    const taken = new Map<number, string>([[dateColumn, 'the time']])
    const claim = (path: string, index: number | null, what: string) => {
      if (index === null) return
      const other = taken.get(index)
      if (other) context.addIssue({ code: 'custom', path: [path], message: `This column is ${other} already.` })
      else taken.set(index, what)
    }
    claim('clockColumn', clockColumn, 'the time of day')
    claim('tempColumn', tempColumn, 'the temperature')
    claim('humidityColumn', humidityColumn, 'the humidity')
    claim('pressureColumn', pressureColumn, 'the pressure')
  })
export type UploadSettings = z.infer<typeof uploadSettings>

/** Which way the rows of a file run; it decides between the two meanings of a time in the hour that is lived twice. */
export const ROW_ORDERS = ['oldest first', 'newest first'] as const
export type RowOrder = (typeof ROW_ORDERS)[number]

/** What is kept with an upload: how somebody wants it read, and which way its rows run. */
export const keptSettings = z.strictObject({ settings: uploadSettings, order: z.enum(ROW_ORDERS) })
