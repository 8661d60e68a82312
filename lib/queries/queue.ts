import { QueryTypes } from 'sequelize'
import type { Clock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { newId } from '@/lib/core/ids'
import { dataVersion } from '@/lib/queries/data-version'
import { loadFloor } from '@/lib/queries/floor'
import { workerPulse } from '@/lib/queries/worker-pulse'
import { placeFansOf, queueBath, queueRoom, queueShift, queueTree } from '@/lib/queue/assemble'
import type { Queue } from '@/lib/queue/contract'
import { database } from '@/models'

export type LoadedQueue = { etag: string; queue: Queue }

declare global {
  var kilnwardQueueCache: { promise: Promise<LoadedQueue>; etag: string } | undefined
}

/** Changes with each start of the process: SQLite counts its versions for one open file only. */
const bootId = newId()

/** The ETag of the queue: the version of the records and the minute. */
async function queueEtag(now: number): Promise<string> {
  return `"${bootId}-${await dataVersion()}-${Math.floor(now / 60_000)}"`
}

/** The queue for the floor. Worked out once for each change or minute, however many tablets ask. */
export async function loadQueue({ clock }: { clock: Clock }): Promise<LoadedQueue> {
  const now = clock.now()
  const etag = await queueEtag(now)
  const cached = globalThis.kilnwardQueueCache
  if (cached?.etag === etag) return cached.promise
  const promise = makeQueue(now).then((queue) => ({ etag, queue }))
  globalThis.kilnwardQueueCache = { etag, promise }
  // A failure must not be remembered.
  promise.catch(() => {
    if (globalThis.kilnwardQueueCache?.promise === promise) globalThis.kilnwardQueueCache = undefined
  })
  return promise
}

async function makeQueue(now: number): Promise<Queue> {
  const [{ foundry, context, fanSwitches, trees }, baths, worker] = await Promise.all([
    loadFloor({ now, trees: { on: 'floor' } }),
    loadBaths(),
    workerPulse(now),
  ])
  const places = foundry.places.filter((place) => !place.isRetired)
  const usedSensors = new Set(places.map((place) => place.sensorId))
  return {
    now,
    foundry: {
      name: foundry.name,
      timeZone: foundry.timeZone,
      isDemo: foundry.isDemo,
      hasDemoData: foundry.hasDemoData,
      isDemoFeedOn: foundry.hasDemoData && env().DEMO_FEED === 'on',
    },
    shift: queueShift(now, context.shifts, foundry.timeZone),
    rooms: foundry.sensors
      .filter((sensor) => usedSensors.has(sensor.id))
      .flatMap((sensor) => {
        const climate = context.climates.get(sensor.id)
        return climate ? [queueRoom(climate, sensor, foundry.pressurePa)] : []
      }),
    baths: baths.map((bath) =>
      queueBath(
        { id: bath.id, name: bath.name, kind: bath.kind },
        bath.stirredAt === null ? null : { at: bath.stirredAt, by: bath.stirredBy ?? '' },
        {
          now,
          timeZone: foundry.timeZone,
        },
      ),
    ),
    places: places.map((place) => ({
      id: place.id,
      name: place.name,
      sensorId: place.sensorId,
      needsTypedReading: place.isTypedOnly,
      fans: placeFansOf(place, context, fanSwitches),
    })),
    worker,
    trees: trees.map((tree) => queueTree(tree, context.places)),
  }
}

type BathRow = { id: string; name: string; kind: 'face' | 'backup'; stirredAt: number | null; stirredBy: string | null }

function loadBaths(): Promise<BathRow[]> {
  return database.query<BathRow>(
    `SELECT b.id, b.name, b.kind, s.stirred_at AS stirredAt, m.name AS stirredBy
       FROM baths b
       LEFT JOIN bath_stirs s ON s.id = (SELECT id FROM bath_stirs WHERE bath_id = b.id ORDER BY stirred_at DESC LIMIT 1)
       LEFT JOIN members m ON m.id = s.member_id
      WHERE b.retired_at IS NULL ORDER BY b.kind DESC, b.name`,
    { type: QueryTypes.SELECT },
  )
}
