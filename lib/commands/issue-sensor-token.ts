import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import { AppError } from '@/lib/core/errors'
import type { Actor } from '@/lib/members/actor'
import { makeSensorToken } from '@/lib/server/sensor-token'
import { inTransaction, Sensor, SensorToken } from '@/models'

/**
 * Makes a token with which a logger sends readings. Older ones stay good until revoked, so that a change can overlap.
 * The history tells its id, never the token.
 *
 * @param by.member null is Kilnward itself.
 * @returns the token itself, for this one time.
 * @throws {AppError} not_found, or conflict for a retired sensor or a wall hygrometer.
 */
export async function issueSensorToken(
  input: { sensorId: number },
  { member, clock }: { member: Actor | null; clock: Clock },
): Promise<{ id: string; token: string }> {
  const { id, token, secretSha256 } = makeSensorToken()
  await inTransaction(async () => {
    const sensor = await Sensor.findByPk(input.sensorId)
    if (!sensor) throw new AppError('not_found', 'There is no such sensor.')
    if (sensor.retiredAt !== null) throw new AppError('conflict', `${sensor.name} is retired.`)
    if (sensor.kind !== 'logger') throw new AppError('conflict', `${sensor.name} is read by people; it needs no token.`)
    const now = clock.now()
    await SensorToken.create({ id, sensorId: sensor.id, secretSha256, createdBy: member?.id ?? null, createdAt: now })
    await addFoundryEvent(
      { type: 'sensor', id: String(sensor.id), name: sensor.name },
      { kind: 'token issued', by: member, at: now, text: `Token ${id} issued for ${sensor.name}.`, isDemo: sensor.isDemo },
    )
  })
  return { id, token }
}
