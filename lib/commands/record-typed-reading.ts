import type { z } from 'zod'
import { recordReadings } from '@/lib/commands/record-readings'
import { runOperation } from '@/lib/commands/run-operation'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { FUTURE_LIMIT_MS, PAST_LIMIT_MS } from '@/lib/room/check-rows'
import type { typedReading } from '@/lib/room/reading-contract'
import { Sensor } from '@/models'

/**
 * Records what a person read off the hygrometer now, or at the time they name; it holds until the next reading, 12 h at most.
 *
 * @throws {AppError} not_found when there is no such sensor in use; unprocessable for a time ahead of the clock or over 31 days back.
 */
export function recordTypedReading(input: z.infer<typeof typedReading>, { member, clock }: { member: Actor; clock: Clock }) {
  const { operationId, sensorId, airTempC, relHumidityPct } = input
  const now = clock.now()
  const measuredAt = input.measuredAt ?? now
  return runOperation({ operationId, kind: 'typed reading', memberId: member.id, body: input, clock }, async () => {
    const sensor = await Sensor.findByPk(sensorId)
    if (!sensor || sensor.retiredAt !== null) throw new AppError('not_found', 'There is no such sensor.')
    if (measuredAt > now + FUTURE_LIMIT_MS) throw badTime('This time lies ahead of the clock.')
    if (measuredAt < now - PAST_LIMIT_MS) throw badTime('This time lies more than 31 days back.')
    await recordReadings({ sensorId, source: 'typed', enteredBy: member.id, rows: [{ measuredAt, airTempC, relHumidityPct }] }, { clock })
    return { status: 201, response: { sensorId, measuredAt } }
  })
}

const badTime = (message: string) => new AppError('unprocessable', message, { fields: [{ path: 'measuredAt', message }] })
