import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import { makeSensorToken } from '@/lib/server/sensor-token'
import { inTransaction, Sensor, SensorToken } from '@/models'

/**
 * Makes a token with which a logger sends readings. Older ones stay good until revoked, so that a change can overlap.
 *
 * @returns the token itself, for this one time.
 * @throws {AppError} not_found, or conflict for a retired sensor or a wall hygrometer.
 */
export async function issueSensorToken(
  input: { sensorId: number; memberId: string | null },
  { clock }: { clock: Clock },
): Promise<{ id: string; token: string }> {
  const { id, token, secretSha256 } = makeSensorToken()
  await inTransaction(async () => {
    const sensor = await Sensor.findByPk(input.sensorId)
    if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
    if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired.`)
    if (sensor.kind !== 'logger') throw new AppError('conflict', `${sensor.name} is read by people; it needs no token.`)
    await SensorToken.create({ id, sensorId: sensor.id, secretSha256, createdBy: input.memberId, createdAt: clock.now() })
  })
  return { id, token }
}
