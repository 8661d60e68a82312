import { QueryTypes } from 'sequelize'
import { database, Foundry } from '@/models'

export type DemoFeedState = {
  /** When the demo's history begins: its climate is counted from there. */
  startsAt: number
  loggers: { sensorId: number; name: string; newestAt: number | null }[]
}

/** What the demo's own sensors have to go on from; null in a foundry of one's own, or before there is one. */
export async function loadDemoFeed(): Promise<DemoFeedState | null> {
  const foundry = await Foundry.findByPk(1)
  if (!foundry?.isDemo) return null
  const loggers = await database.query<DemoFeedState['loggers'][number]>(
    `SELECT s.id AS sensorId, s.name, (SELECT max(r.measured_at) FROM readings r WHERE r.sensor_id = s.id) AS newestAt
       FROM sensors s WHERE s.kind = 'logger' AND s.retired_at IS NULL ORDER BY s.id`,
    { type: QueryTypes.SELECT },
  )
  return { startsAt: foundry.createdAt, loggers }
}
