import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { Op, QueryTypes } from 'sequelize'
import { noteSender } from '@/lib/commands/note-sender'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Clock } from '@/lib/core/clock'
import type { MqttRow, SortedMessage } from '@/lib/mqtt/sort-messages'
import { REASON_SENTENCES, type SetAsideReason } from '@/lib/room/reading-marks'
import { database, inTransaction, MqttHour, MqttMessage, Sensor } from '@/models'

const LONGEST_TEXT = 500
const LONGEST_REASON = 500
/** Topics of which the last message is kept. */
export const MOST_MESSAGES = 200

/**
 * Takes what came from the broker in a moment, in one transaction: the readings, the last message on each topic, the counts of the hour.
 * Readings known already, by sensor and time, change nothing.
 *
 * @param dropped how many messages came faster than they could be kept.
 * @returns how many readings were new.
 */
export function takeMqttMessages(
  { messages, dropped }: { messages: readonly SortedMessage[]; dropped: number },
  { clock }: { clock: Clock },
): Promise<number> {
  if (messages.length === 0 && dropped === 0) return Promise.resolve(0)
  return inTransaction(async () => {
    const recorded = await recordAll(messages, clock)
    await noteBatteries(messages, clock)
    await keepLast(messages, recorded)
    const readings = [...recorded.values()].reduce((sum, { added }) => sum + added, 0)
    await countHour({ messages, readings, dropped }, clock.now())
    return readings
  })
}

/** What became of the rows of one sensor: how many were new, and which are kept and not counted, by their instant. */
type Recorded = { added: number; marks: ReadonlyMap<number, SetAsideReason> }

async function recordAll(messages: readonly SortedMessage[], clock: Clock): Promise<Map<number, Recorded>> {
  const bySensor = new Map<number, Map<number, MqttRow>>()
  for (const { sensorId, row } of messages.flatMap(({ rows }) => rows)) {
    // Of several in one moment the last: what waited at the broker comes oldest first.
    bySensor.set(sensorId, (bySensor.get(sensorId) ?? new Map<number, MqttRow>()).set(row.measuredAt, row))
  }
  const recorded = new Map<number, Recorded>()
  if (bySensor.size === 0) return recorded
  // One that was retired or removed in this second takes nothing any more.
  for (const { id } of await Sensor.findAll({ where: { id: [...bySensor.keys()], retiredAt: null } })) {
    const rows = [...(bySensor.get(id)?.values() ?? [])]
    const { added, marks } = await recordReadings({ sensorId: id, source: 'sensor', enteredBy: null, rows }, { clock })
    const marked = rows.flatMap(({ measuredAt }, index) => (marks[index] ? [[measuredAt, marks[index]] as const] : []))
    recorded.set(id, { added, marks: new Map(marked) })
  }
  return recorded
}

async function noteBatteries(messages: readonly SortedMessage[], clock: Clock): Promise<void> {
  const newest = new Map(messages.flatMap(({ batteries }) => batteries.map(({ sensorId, pct }) => [sensorId, pct] as const)))
  if (newest.size === 0) return
  for (const { id } of await Sensor.findAll({ where: { id: [...newest.keys()] } })) {
    await noteSender(id, { batteryPct: newest.get(id), clockOffsetSeconds: undefined }, { clock })
  }
}

/** The outcome that is known only once the rows are in. */
function outcomeOf({ outcome, reason, rows }: SortedMessage, recorded: ReadonlyMap<number, Recorded>) {
  if (outcome !== 'taken') return { outcome, reason }
  const mark = rows.map(({ sensorId, row }) => recorded.get(sensorId)?.marks.get(row.measuredAt)).find((each) => each !== undefined)
  if (mark !== undefined) return { outcome: 'set aside' as const, reason: REASON_SENTENCES[mark] }
  const isKnown = rows.every(({ sensorId }) => (recorded.get(sensorId)?.added ?? 0) === 0)
  return isKnown ? { outcome: 'repeated' as const, reason: 'There is a reading of this moment already.' } : { outcome, reason }
}

async function keepLast(messages: readonly SortedMessage[], recorded: ReadonlyMap<number, Recorded>): Promise<void> {
  const last = new Map(messages.map((message) => [message.arrival.topic, message]))
  const rows = [...last.values()].map((message) => {
    const { outcome, reason } = outcomeOf(message, recorded)
    return {
      topic: message.arrival.topic,
      receivedAt: message.arrival.arrivedAt,
      text: message.arrival.text.slice(0, LONGEST_TEXT),
      sha256: message.arrival.sha256,
      outcome,
      reason: reason.slice(0, LONGEST_REASON),
    }
  })
  if (rows.length === 0) return
  await MqttMessage.bulkCreate(rows, { updateOnDuplicate: ['receivedAt', 'text', 'sha256', 'outcome', 'reason'] })
  await database.query(
    `DELETE FROM mqtt_messages WHERE topic NOT IN (SELECT topic FROM mqtt_messages ORDER BY received_at DESC LIMIT ${MOST_MESSAGES})`,
    { type: QueryTypes.BULKDELETE },
  )
}

async function countHour(
  { messages, readings, dropped }: { messages: readonly SortedMessage[]; readings: number; dropped: number },
  now: number,
): Promise<void> {
  const refused = messages.filter(({ outcome }) => outcome === 'refused').length
  await database.query(
    `INSERT INTO mqtt_hours (hour_start, message_count, reading_count, refused_count, dropped_count)
     VALUES (:hourStart, :messages, :readings, :refused, :dropped)
     ON CONFLICT (hour_start) DO UPDATE SET message_count = message_count + excluded.message_count,
       reading_count = reading_count + excluded.reading_count, refused_count = refused_count + excluded.refused_count,
       dropped_count = dropped_count + excluded.dropped_count`,
    {
      type: QueryTypes.INSERT,
      replacements: {
        hourStart: Math.floor(now / millisecondsInHour) * millisecondsInHour,
        messages: messages.length + dropped,
        readings,
        refused,
        dropped,
      },
    },
  )
  await MqttHour.destroy({ where: { hourStart: { [Op.lt]: now - millisecondsInDay - millisecondsInHour } } })
}
