import { QueryTypes } from 'sequelize'
import { database } from '@/models'

export type DemoFeedState = {
  /** When the demo's history begins: its climate is counted from there. */
  startsAt: number
  timeZone: string
  loggers: { sensorId: number; name: string; newestAt: number | null }[]
}

/** What the demo's own sensors have to go on from; null where there is no demo. */
export async function loadDemoFeed(): Promise<DemoFeedState | null> {
  const rows = await database.query<DemoFeedState['loggers'][number] & { createdAt: number; timeZone: string }>(
    `SELECT s.id AS sensorId, s.name, s.created_at AS createdAt, f.time_zone AS timeZone,
            (SELECT max(r.measured_at) FROM readings r WHERE r.sensor_id = s.id) AS newestAt
       FROM sensors s JOIN foundry f WHERE s.is_demo = 1 AND s.kind = 'logger' AND s.retired_at IS NULL ORDER BY s.id`,
    { type: QueryTypes.SELECT },
  )
  const [first] = rows
  if (!first) return null
  const loggers = rows.map(({ sensorId, name, newestAt }) => ({ sensorId, name, newestAt }))
  return { startsAt: first.createdAt, timeZone: first.timeZone, loggers }
}
