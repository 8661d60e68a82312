import { isSameDigest, parseSensorToken } from '@/lib/server/sensor-token'
import { SensorToken } from '@/models'

export type TokenSensor = { tokenId: string; sensorId: number; sensorName: string; lastUsedAt: number | null }

/** The sensor that a token speaks for; null for an unknown, wrong or revoked token and for a retired sensor. */
export async function sensorOfToken(presented: string): Promise<TokenSensor | null> {
  const parsed = parseSensorToken(presented)
  if (!parsed) return null
  const token = await SensorToken.findByPk(parsed.id, { include: 'sensor' })
  const sensor = token?.sensor
  if (!token || !sensor || !isSameDigest(token.secretSha256, parsed.secretSha256)) return null
  if (token.revokedAt !== null || sensor.retiredAt !== null) return null
  return { tokenId: token.id, sensorId: sensor.id, sensorName: sensor.name, lastUsedAt: token.lastUsedAt }
}
