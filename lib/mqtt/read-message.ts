import { toSi, type TempUnit } from '@/lib/format/units'
import { figurePaths, readJsonPath, valueAtPath } from '@/lib/mqtt/json-path'
import type { TimeForm } from '@/lib/mqtt/time-form'
import { instant } from '@/lib/room/reading-contract'

/** Where in the messages of a topic the figures stand. A path that is null is not told by this topic. */
export type MessageForm = {
  tempPath: string | null
  rhPath: string | null
  pressurePath: string | null
  timePath: string | null
  batteryPath: string | null
  tempUnit: TempUnit
  timeForm: TimeForm
}

/** What one message tells: °C, %, Pa and epoch milliseconds. Null: this topic does not tell it. */
export type MessageValues = {
  airTempC: number | null
  relHumidityPct: number | null
  pressurePa: number | null
  measuredAt: number | null
  batteryPct: number | null
}

/** Loggers' messages are a few hundred bytes; a camera's picture is not read. */
export const LARGEST_MESSAGE_BYTES = 16_384
/** From far above the highest town to the Dead Sea. */
const LEAST_PRESSURE_PA = 50_000
const MOST_PRESSURE_PA = 110_000
const PATHS_TOLD = 6

/** A message that cannot be read; the sentence is for the person who set the paths. */
class Unreadable extends Error {}

/** Reads the figures out of a message, or says in a sentence why it cannot. Ranges are not looked at here. */
export function readMessage(text: string, form: MessageForm): { values: MessageValues } | { refusal: string } {
  let message: unknown
  try {
    message = JSON.parse(text)
  } catch {
    return { refusal: text.trim() === '' ? 'The message is empty.' : 'The message is not JSON, nor a number alone.' }
  }
  try {
    const airTemp = numberAt(message, form.tempPath, 'temperature')
    return {
      values: {
        airTempC: airTemp === null ? null : toSi(airTemp, form.tempUnit),
        relHumidityPct: numberAt(message, form.rhPath, 'humidity'),
        pressurePa: pressureAt(message, form.pressurePath),
        measuredAt: timeAt(message, form),
        batteryPct: batteryAt(message, form.batteryPath),
      },
    }
  } catch (error) {
    if (error instanceof Unreadable) return { refusal: error.message }
    throw error
  }
}

function foundAt(message: unknown, path: string, what: string): unknown {
  const value = valueAtPath(message, readJsonPath(path) ?? [])
  if (value !== undefined && value !== null) return value
  const paths = figurePaths(message, PATHS_TOLD)
  const told = paths.length === 0 ? 'There is no figure in it at all.' : `It has ${paths.join(', ')}.`
  throw new Unreadable(`There is no ${what} at ${path}. ${told}`)
}

function numberAt(message: unknown, path: string | null, what: string): number | null {
  if (path === null) return null
  const number = asNumber(foundAt(message, path, what))
  if (number === null) throw new Unreadable(`What stands at ${path} is not a number.`)
  return number
}

/** A number, or a text that is nothing but one: many loggers quote theirs. */
function asNumber(value: unknown): number | null {
  if (typeof value === 'number') return Number.isFinite(value) ? value : null
  return typeof value === 'string' && /^\s*[+-]?\d+(?:\.\d+)?\s*$/.test(value) ? Number(value) : null
}

function timeAt(message: unknown, { timePath, timeForm }: MessageForm): number | null {
  if (timePath === null || timeForm === 'arrival') return null
  const value = foundAt(message, timePath, 'time')
  if (timeForm === 'iso') {
    const read = instant.safeParse(typeof value === 'string' ? value.trim() : Number.NaN)
    if (!read.success) throw new Unreadable(`What stands at ${timePath} is not a time in ISO 8601 with its zone.`)
    return read.data
  }
  const count = asNumber(value)
  if (count === null || count < 0) throw new Unreadable(`What stands at ${timePath} is not a count since 1970.`)
  return Math.round(timeForm === 'epoch s' ? count * 1000 : count)
}

/** In Pa, hPa (millibar) or kPa: where people live no figure of one can be meant in another. Like the battery, it keeps no reading away. */
function pressureAt(message: unknown, path: string | null): number | null {
  const figure = path === null ? null : asNumber(valueAtPath(message, readJsonPath(path) ?? []))
  const factor =
    figure === null ? undefined : [1, 100, 1000].find((each) => figure * each >= LEAST_PRESSURE_PA && figure * each <= MOST_PRESSURE_PA)
  return figure === null || factor === undefined ? null : figure * factor
}

/** Beside the point: a battery that cannot be read keeps no reading away. */
function batteryAt(message: unknown, path: string | null): number | null {
  const level = path === null ? null : asNumber(valueAtPath(message, readJsonPath(path) ?? []))
  return level === null || level < 0 || level > 100 ? null : level
}
