import { formatDay, formatMoment } from '@/lib/format/local-time'
import { formatKelvin, formatLength, formatMass, formatTemperature, type Units } from '@/lib/format/units'

export type ChangeContext = {
  now: number
  timeZone: string
  units: Units
  /** Names of what an id stands for, as they are now. */
  names: ReadonlyMap<string, string>
}

/** One field that changed. Null: there was none, or there is none any more. */
export type ChangeRow = { field: string; before: string | null; after: string | null }

const MOST_ROWS = 60
const NONE = '–'
const UUID = /^[0-9a-f]{8}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{4}-[0-9a-f]{12}$/
const DAY = /^\d{4}-\d{2}-\d{2}$/

type Ending = { ending: RegExp; show: (value: number, context: ChangeContext) => string }

/** Without the crumbs of binary fractions. */
const plain = (value: number) => String(Number(value.toFixed(4)))
const suffix = (unit: string) => (value: number) => `${plain(value)}\u00A0${unit}`

/** Units in names, and what a person reads instead. The first that fits counts. */
const ENDINGS: readonly Ending[] = [
  { ending: /Kg$/, show: (value, { units }) => formatMass(value, units.mass) },
  { ending: /Mm$/, show: (value, { units }) => formatLength(value, units.length) },
  { ending: /(?<=[a-z])C$/, show: (value, { units }) => formatTemperature(value, units.temp) },
  { ending: /(?<=[a-z])K$/, show: (value, { units }) => formatKelvin(value, units.temp) },
  { ending: /Mps$/, show: suffix('m/s') },
  { ending: /Pct$/, show: suffix('%') },
  { ending: /(?<=[a-z])L$/, show: suffix('L') },
  { ending: /(?<=[a-z])M$/, show: suffix('m') },
  { ending: /Hours$/, show: suffix('h') },
  { ending: /Minutes$/, show: suffix('min') },
  { ending: /Seconds$/, show: suffix('s') },
  { ending: /Minute$/, show: (value) => `${pad(Math.floor(value / 60))}:${pad(value % 60)}` },
  { ending: /At$/, show: (value, { now, timeZone }) => formatMoment(value, now, timeZone) },
]

const pad = (value: number) => String(value).padStart(2, '0')

/**
 * What changed, field by field in words, from the two halves of a line of history. Lists are taken apart: 'coats 3, drain'.
 *
 * @example changeRows({ airSpeedFansOnMps: 1.2 }, { airSpeedFansOnMps: 1.4 }, context)
 * // => [{ field: 'air speed fans on', before: '1.2 m/s', after: '1.4 m/s' }]
 */
export function changeRows(
  before: Readonly<Record<string, unknown>>,
  after: Readonly<Record<string, unknown>>,
  context: ChangeContext,
): ChangeRow[] {
  const [old, fresh] = [leavesOf(before), leavesOf(after)]
  const rows = [...new Set([...old.keys(), ...fresh.keys()])]
    .filter((path) => JSON.stringify(old.get(path) ?? null) !== JSON.stringify(fresh.get(path) ?? null))
    .map((path) => ({
      field: path
        .split('.')
        .map(fieldWords)
        .join(', ')
        .replaceAll(/, (\d+)/g, ' $1'),
      before: valueWords(path, old.get(path), context),
      after: valueWords(path, fresh.get(path), context),
    }))
  return rows.slice(0, MOST_ROWS)
}

/** Values that are not lists or groups of others, by their path; lists count from one. */
function leavesOf(value: unknown, path: readonly string[] = []): Map<string, unknown> {
  if (value === null || typeof value !== 'object') return new Map([[path.join('.'), value]])
  const inner = Array.isArray(value) ? value.map((each: unknown, index) => [String(index + 1), each] as const) : Object.entries(value)
  return new Map(inner.flatMap(([key, each]) => [...leavesOf(each, [...path, key])]))
}

/**
 * A field's name in words: without its unit, which stands with the value.
 *
 * @example fieldWords('isWaxAtRoomTemp') // => 'wax at room temp'
 */
export function fieldWords(name: string): string {
  const bare = ENDINGS.reduce((text, { ending }) => (text === name ? text.replace(ending, '') : text), name)
  const words = (bare === '' ? name : bare)
    .replace(/^(?:is|are|has)(?=[A-Z])/, '')
    .replace(/Id$/, '')
    .replaceAll(/([a-z0-9])([A-Z])/g, '$1 $2')
  return words.toLowerCase()
}

function valueWords(path: string, value: unknown, context: ChangeContext): string | null {
  if (value === undefined) return null
  if (value === null || value === '') return NONE
  if (typeof value === 'boolean') return value ? 'yes' : 'no'
  if (typeof value === 'number') {
    const name = path.split('.').findLast((part) => !/^\d+$/.test(part)) ?? ''
    return ENDINGS.find(({ ending }) => ending.test(name))?.show(value, context) ?? plain(value)
  }
  const text = typeof value === 'string' ? value : JSON.stringify(value)
  if (UUID.test(text)) return context.names.get(text) ?? 'one that is gone'
  return DAY.test(text) ? formatDay(text) : text
}
