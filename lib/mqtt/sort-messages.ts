import { millisecondsInMinute } from 'date-fns/constants'
import { LARGEST_MESSAGE_BYTES, readMessage, type MessageForm, type MessageValues } from '@/lib/mqtt/read-message'
import { rememberRepeats } from '@/lib/mqtt/repeats'
import { topicFits } from '@/lib/mqtt/topic-filter'
import { checkRows } from '@/lib/room/check-rows'
import type { ReadingRow } from '@/lib/room/reading-contract'

/** A topic that feeds a sensor. */
export type TopicRule = MessageForm & { filter: string; sensorId: number; sensorName: string }

/** A message as it came. Its text is only read up to the size that is read at all. */
export type Arrival = {
  topic: string
  text: string
  sizeBytes: number
  sha256: string
  arrivedAt: number
  /** The broker kept it, and gives it to whoever subscribes. */
  isRetained: boolean
  /** It waited at the broker while Kilnward was away for longer than a reading may be late. */
  isHeldBack: boolean
  /** The broker says that it has sent it before. */
  isSentAgain: boolean
}

/** A row of readings, with the pressure of a barometer beside the sensor. */
export type MqttRow = ReadingRow & { pressurePa?: number | undefined }

/**
 * What became of a message. 'set aside': kept, and not counted by the clock; 'waiting': it tells one half of a reading;
 * 'passed over': nobody knows how old it is; 'repeated': known already.
 */
export type MessageOutcome = 'taken' | 'set aside' | 'waiting' | 'repeated' | 'passed over' | 'refused'

export type SortedMessage = {
  arrival: Arrival
  outcome: MessageOutcome
  /** A sentence where it gave no reading. */
  reason: string
  rows: { sensorId: number; row: MqttRow }[]
  batteries: { sensorId: number; pct: number }[]
}

/** A message without a time counts from its arrival, to the full ten seconds: what comes twice in a moment is one reading. */
const ARRIVAL_STEP_MS = 10_000
/** Temperature and humidity that come apart belong together when both are this new. */
export const HALVES_WITHIN_MS = 2 * millisecondsInMinute

type Half = { value: number; measuredAt: number }
type Halves = { airTempC: Half | null; relHumidityPct: Half | null }

export type Sorter = {
  sort: (arrival: Arrival, rules: readonly TopicRule[]) => SortedMessage | null
  /** Tells of a message that was taken before this program began. */
  note: (message: { topic: string; sha256: string; arrivedAt: number }) => void
}

/** Turns messages into rows of readings, one after the other; remembers what it needs for halves and repeats. */
export function messageSorter(): Sorter {
  const repeats = rememberRepeats()
  const waiting = new Map<number, Halves>()

  /** The reading that a half completes, each half counting once; null while the other is missing or too old. */
  function pair(sensorId: number, { airTempC, relHumidityPct }: MessageValues, measuredAt: number): Omit<MqttRow, 'pressurePa'> | null {
    const halves = waiting.get(sensorId) ?? { airTempC: null, relHumidityPct: null }
    if (airTempC !== null) halves.airTempC = { value: airTempC, measuredAt }
    if (relHumidityPct !== null) halves.relHumidityPct = { value: relHumidityPct, measuredAt }
    const { airTempC: temp, relHumidityPct: humidity } = halves
    const isPair = temp !== null && humidity !== null && Math.abs(temp.measuredAt - humidity.measuredAt) <= HALVES_WITHIN_MS
    if (!isPair) {
      waiting.set(sensorId, halves)
      return null
    }
    waiting.delete(sensorId)
    return { measuredAt: Math.max(temp.measuredAt, humidity.measuredAt), airTempC: temp.value, relHumidityPct: humidity.value }
  }

  function apply(arrival: Arrival, rule: TopicRule): Omit<SortedMessage, 'arrival'> {
    const read = readMessage(arrival.text, rule)
    if ('refusal' in read) return { rows: [], batteries: [], outcome: 'refused', reason: read.refusal }
    const { values } = read
    const none = { rows: [], batteries: values.batteryPct === null ? [] : [{ sensorId: rule.sensorId, pct: values.batteryPct }] }
    if (values.measuredAt === null) {
      const reason = ageUnknown(arrival)
      if (reason !== null) return { ...none, outcome: 'passed over', reason }
    }
    const isWhole = values.airTempC !== null && values.relHumidityPct !== null
    // A whole reading with its own time is known by it; a half that came again would be laid to the next other half.
    if ((values.measuredAt === null || !isWhole) && repeats.isRepeat(arrival)) {
      return { ...none, outcome: 'repeated', reason: 'The same message again.' }
    }
    const measuredAt = values.measuredAt ?? Math.floor(arrival.arrivedAt / ARRIVAL_STEP_MS) * ARRIVAL_STEP_MS
    const row = isWhole ? { ...values, measuredAt } : pair(rule.sensorId, values, measuredAt)
    if (row === null) {
      const missing = values.airTempC === null ? 'temperature' : 'humidity'
      return { ...none, outcome: 'waiting', reason: `Waits for the ${missing}, for 2 min at most.` }
    }
    const { rows, rejected } = checkRows(
      [{ measuredAt: row.measuredAt, airTempC: row.airTempC, relHumidityPct: row.relHumidityPct }],
      arrival.arrivedAt,
    )
    // The field's name is that of the door for readings.
    if (rejected[0]) return { ...none, outcome: 'refused', reason: rejected[0].reason.replace(/^measuredAt /, 'Its time ') }
    const { pressurePa } = values
    const told = rows.map((good) => ({ sensorId: rule.sensorId, row: pressurePa === null ? good : { ...good, pressurePa } }))
    return { ...none, rows: told, outcome: 'taken', reason: '' }
  }

  return {
    note: repeats.note,
    sort: (arrival, rules) => {
      const fitting = rules.filter((rule) => topicFits(rule.filter, arrival.topic))
      if (fitting.length === 0) return null
      if (arrival.sizeBytes > LARGEST_MESSAGE_BYTES) {
        const reason = `The message has ${arrival.sizeBytes} bytes; more than ${LARGEST_MESSAGE_BYTES} are not read.`
        return { arrival, outcome: 'refused', reason, rows: [], batteries: [] }
      }
      const parts = fitting.map((rule) => ({ rule, ...apply(arrival, rule) }))
      repeats.note(arrival)
      // The one that a person has to look at first, and of several sensors by its name.
      const worst = parts.toSorted((one, other) => GRAVITY.indexOf(one.outcome) - GRAVITY.indexOf(other.outcome))[0]!
      return {
        arrival,
        outcome: worst.outcome,
        reason: worst.reason !== '' && parts.length > 1 ? `${worst.rule.sensorName}: ${worst.reason}` : worst.reason,
        rows: parts.flatMap(({ rows }) => rows),
        batteries: parts.flatMap(({ batteries }) => batteries),
      }
    },
  }
}

const GRAVITY: readonly MessageOutcome[] = ['refused', 'passed over', 'waiting', 'set aside', 'taken', 'repeated']

function ageUnknown({ isRetained, isHeldBack }: Arrival): string | null {
  if (isRetained) return 'The broker kept it, and it does not say when it was measured. Nobody knows how old it is.'
  if (isHeldBack) return 'It waited at the broker while Kilnward was away, and does not say when it was measured.'
  return null
}
