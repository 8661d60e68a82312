import type { z } from 'zod'
import { recordReadings } from '@/lib/commands/record-readings'
import { runOperation } from '@/lib/commands/run-operation'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import type { typedReading } from '@/lib/room/reading-contract'
import { Sensor } from '@/models'

/**
 * Records what a person read off the hygrometer now; it holds until the next reading, 12 h at most.
 *
 * @throws {AppError} not_found when there is no such sensor in use.
 */
export function recordTypedReading(input: z.infer<typeof typedReading>, { member, clock }: { member: Actor; clock: Clock }) {
  const { operationId, sensorId, airTempC, relHumidityPct } = input
  return runOperation({ operationId, kind: 'typed reading', memberId: member.id, body: input, clock }, async () => {
    const sensor = await Sensor.findByPk(sensorId)
    if (!sensor || sensor.retiredAt !== null) throw new AppError('not_found', 'There is no such sensor.')
    const measuredAt = clock.now()
    await recordReadings({ sensorId, source: 'typed', enteredBy: member.id, rows: [{ measuredAt, airTempC, relHumidityPct }] }, { clock })
    return { status: 201, response: { sensorId, measuredAt } }
  })
}
