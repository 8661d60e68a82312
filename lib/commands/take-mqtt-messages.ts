import { millisecondsInDay, millisecondsInHour } from 'date-fns/constants'
import { Op, QueryTypes } from 'sequelize'
import { recordReadings } from '@/lib/commands/record-readings'
import type { Clock } from '@/lib/core/clock'
import type { SortedMessage } from '@/lib/mqtt/sort-messages'
import type { ReadingRow } from '@/lib/room/reading-contract'
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
    const added = await recordAll(messages, clock)
    await keepLast(messages, added)
    const readings = [...added.values()].reduce((sum, count) => sum + count, 0)
    await countHour({ messages, readings, dropped }, clock.now())
    return readings
  })
}

/** @returns how many rows were new, by sensor. */
async function recordAll(messages: readonly SortedMessage[], clock: Clock): Promise<Map<number, number>> {
  const bySensor = new Map<number, Map<number, ReadingRow>>()
  for (const { sensorId, row } of messages.flatMap(({ rows }) => rows)) {
    // Of several in one moment the last: what waited at the broker comes oldest first.
    bySensor.set(sensorId, (bySensor.get(sensorId) ?? new Map<number, ReadingRow>()).set(row.measuredAt, row))
  }
  const added = new Map<number, number>()
  if (bySensor.size === 0) return added
  // One that was retired or removed in this second takes nothing any more.
  for (const { id } of await Sensor.findAll({ where: { id: [...bySensor.keys()], retiredAt: null } })) {
    const rows = [...(bySensor.get(id)?.values() ?? [])]
    added.set(id, await recordReadings({ sensorId: id, source: 'sensor', enteredBy: null, rows }, { clock }))
  }
  return added
}

async function keepLast(messages: readonly SortedMessage[], added: ReadonlyMap<number, number>): Promise<void> {
  const last = new Map(messages.map((message) => [message.arrival.topic, message]))
  const rows = [...last.values()].map(({ arrival, outcome, reason, rows: readings, batteryPct }) => {
    const isKnown = outcome === 'taken' && readings.every(({ sensorId }) => (added.get(sensorId) ?? 0) === 0)
    return {
      topic: arrival.topic,
      receivedAt: arrival.arrivedAt,
      text: arrival.text.slice(0, LONGEST_TEXT),
      sha256: arrival.sha256,
      outcome: isKnown ? ('repeated' as const) : outcome,
      reason: (isKnown ? 'There is a reading of this moment already.' : reason).slice(0, LONGEST_REASON),
      batteryPct,
    }
  })
  if (rows.length === 0) return
  await MqttMessage.bulkCreate(rows, { updateOnDuplicate: ['receivedAt', 'text', 'sha256', 'outcome', 'reason', 'batteryPct'] })
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
