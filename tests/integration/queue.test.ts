import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { recordStir } from '@/lib/commands/record-stir'
import type { Actor } from '@/lib/members/actor'
import { loadQueue } from '@/lib/queries/queue'
import { queue as queueSchema } from '@/lib/queue/contract'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildTree,
  dipBody,
  HOUR,
  MINUTE,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

let foundry: TestFoundry
let maud: Actor

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator', 'Maud')
  await buildAir(foundry.sensorId, NOW - 24 * HOUR, NOW)
  await buildTree(foundry)
})

describe('the queue', () => {
  it('keeps to its contract', async () => {
    const { queue } = await loadQueue({ clock: stoppedClock() })
    expect(queueSchema.parse(queue)).toEqual(queue)
    expect(queue.rooms).toMatchObject([{ airTempC: 21, relHumidityPct: 50, pull: 'good', isStale: false }])
    expect(queue.rooms[0]!.speedPct).toBeCloseTo(100, 1)
    // Tuesday 10:00: open until 17:00 local time, then Wednesday 07:00 to 17:00.
    expect(queue.shift).toEqual({ isOpen: true, endsAt: NOW + 7 * HOUR, nextStartsAt: NOW + 21 * HOUR, nextEndsAt: NOW + 31 * HOUR })
  })

  it('has the same tag, and is not worked out again, until something is written or the minute turns', async () => {
    const first = await loadQueue({ clock: stoppedClock() })
    const second = await loadQueue({ clock: stoppedClock(NOW + 20_000) })
    expect(second.etag).toBe(first.etag)
    expect(second.queue).toBe(first.queue)
    expect((await loadQueue({ clock: stoppedClock(NOW + MINUTE) })).etag).not.toBe(first.etag)
    const tree = await buildTree(foundry)
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]), { member: maud, clock: stoppedClock() })
    const third = await loadQueue({ clock: stoppedClock() })
    expect(third.etag).not.toBe(first.etag)
    expect(third.queue.trees.find((each) => each.id === tree.id)).toMatchObject({ state: 'wet', coatsOn: 1 })
  })

  it('says when a bath was stirred, for this local day only', async () => {
    await recordStir(foundry.backupBathId, { member: maud, clock: stoppedClock(NOW - HOUR) })
    const bathAt = async (now: number) =>
      (await loadQueue({ clock: stoppedClock(now) })).queue.baths.find((bath) => bath.id === foundry.backupBathId)
    expect(await bathAt(NOW)).toMatchObject({ isStirredToday: true, stirredBy: 'Maud', stirredAt: NOW - HOUR })
    expect(await bathAt(NOW + 14 * HOUR + MINUTE)).toMatchObject({ isStirredToday: false, stirredBy: 'Maud' })
  })
})
