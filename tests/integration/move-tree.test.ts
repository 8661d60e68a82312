import * as fc from 'fast-check'
import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { moveTree } from '@/lib/commands/move-tree'
import { recordReadings } from '@/lib/commands/record-readings'
import { placeFactor } from '@/lib/drying/place-factor'
import { roomDose } from '@/lib/drying/room-curve'
import { roomFactor } from '@/lib/drying/room-factor'
import { roomSegments } from '@/lib/drying/room-segments'
import type { RoomCurve } from '@/lib/drying/types'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadTreeDetail } from '@/lib/queries/tree-detail'
import { TreeEvent, TreePlace } from '@/models'
import {
  buildFoundry,
  buildMember,
  buildPlace,
  buildTree,
  dipBody,
  HOUR,
  MINUTE,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

// NOW is Tuesday 13 October 2026, 10:00 in London.
const SEA_LEVEL_PA = 101_325
let foundry: TestFoundry
let maud: Actor
let ines: Actor
let fast: { id: string }
let slow: { id: string }
/** Straight from the readings, without the hourly table. */
let curve: RoomCurve

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator', 'Maud')
  ines = await buildMember('supervisor', 'Ines')
  fast = await buildPlace({ name: 'Fan rack', airSpeedMps: 2 })
  slow = await buildPlace({ name: 'Still corner', airSpeedMps: 0.1 })
  const rows = []
  // A room that is never the same for long, so that a split at another moment shows.
  for (let at = NOW - 30 * HOUR; at <= NOW; at += 5 * MINUTE) {
    rows.push({ measuredAt: at, airTempC: 20 + 4 * Math.sin(at / (2 * HOUR)), relHumidityPct: 55 + 20 * Math.sin(at / HOUR) })
  }
  const exact = rows.map((row) => ({ ...row, roomFactor: roomFactor(row, SEA_LEVEL_PA), source: 'sensor' as const }))
  curve = roomSegments(exact, { now: NOW })
  await recordReadings({ sensorId: foundry.sensorId, source: 'sensor', enteredBy: null, rows }, { clock: stoppedClock() })
})

/** A tree in still air, dipped there so long ago, or not at all. */
async function hungTree(dippedAgo: number | null = 6 * HOUR) {
  const tree = await buildTree(foundry, { placeId: slow.id, since: NOW - 24 * HOUR })
  if (dippedAgo !== null) {
    const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: slow.id }], { dippedAt: NOW - dippedAgo, drainSeconds: 0 })
    await logDips(run, { member: maud, clock: stoppedClock(NOW - dippedAgo) })
  }
  return tree
}
const move = (
  treeId: string,
  placeId: string,
  { at = NOW, member = maud, movedAt }: { at?: number; member?: Actor; movedAt?: number } = {},
) => moveTree(treeId, placeId, { member, clock: stoppedClock(at) }, movedAt)
const stays = async (treeId: string) =>
  (await TreePlace.findAll({ where: { treeId, withdrawnAt: null }, order: [['since', 'ASC']] })).map(({ placeId, since }) => [
    placeId,
    since,
  ])
const lastEvent = async (treeId: string) =>
  (await TreeEvent.findAll({ where: { treeId, kind: 'moved' }, order: [['id', 'ASC']] })).at(-1)?.detail

describe('a move', () => {
  it("splits the coat's dose at its moment, told at once or later", async () => {
    await fc.assert(
      fc.asyncProperty(fc.integer({ min: 1, max: 6 * HOUR - 1 }), fc.boolean(), async (ago, isToldLate) => {
        const tree = await hungTree()
        const movedAt = NOW - ago
        await move(tree.id, fast.id, isToldLate ? { member: ines, movedAt } : { at: movedAt })
        const { trees } = await loadFloor({ now: NOW, trees: { ids: [tree.id] } })
        const room = (from: number, to: number) => roomDose(curve, from, to).likely
        const expected = placeFactor(0.1, SEA_LEVEL_PA) * room(NOW - 6 * HOUR, movedAt) + placeFactor(2, SEA_LEVEL_PA) * room(movedAt, NOW)
        expect(trees[0]!.call!.dose.likely).toBeCloseTo(expected, 6)
      }),
      { numRuns: 12 },
    )
  })

  it('stands in the history with where from, where to and when', async () => {
    const tree = await hungTree()
    await move(tree.id, fast.id)
    expect(await lastEvent(tree.id)).toMatchObject({ text: 'Moved from Still corner to Fan rack.' })
    await move(tree.id, slow.id, { at: NOW + 30 * MINUTE, movedAt: NOW + 10 * MINUTE })
    expect(await lastEvent(tree.id)).toEqual({
      text: 'Moved from Fan rack to Still corner at 10:10.',
      before: { placeId: fast.id, movedAt: NOW },
      after: { placeId: slow.id, movedAt: NOW + 10 * MINUTE },
    })
    const detail = await loadTreeDetail({ tag: tree.tag, viewer: { id: maud.id, role: 'operator' }, clock: stoppedClock(NOW + HOUR) })
    expect(detail?.history.filter(({ text }) => text.startsWith('Moved')).map(({ text, by }) => [text, by])).toEqual([
      ['Moved from Fan rack to Still corner at 10:10.', 'Maud'],
      ['Moved from Still corner to Fan rack.', 'Maud'],
    ])
  })

  it('that was wrong is put right: to another place, to where it hung all along, or to an earlier moment', async () => {
    const elsewhere = await buildPlace({ name: 'Long rack' })
    const one = await hungTree()
    await move(one.id, fast.id, { at: NOW - 10 * MINUTE })
    await move(one.id, elsewhere.id, { movedAt: NOW - 20 * MINUTE })
    expect((await stays(one.id)).slice(-1)).toEqual([[elsewhere.id, NOW - 20 * MINUTE]])
    expect(await lastEvent(one.id)).toMatchObject({ text: 'Put right: at Long rack since 09:40, not at Fan rack.' })

    const two = await hungTree()
    const before = await stays(two.id)
    await move(two.id, fast.id, { at: NOW - 10 * MINUTE })
    expect(await move(two.id, slow.id, { movedAt: NOW - 20 * MINUTE })).toBe(true)
    expect(await stays(two.id)).toEqual(before)
    expect(await lastEvent(two.id)).toMatchObject({ text: 'Put right: at Still corner since Mon 10:00, not at Fan rack.' })

    const three = await hungTree()
    await move(three.id, fast.id, { at: NOW - 10 * MINUTE })
    await move(three.id, fast.id, { movedAt: NOW - 20 * MINUTE })
    expect((await stays(three.id)).at(-1)).toEqual([fast.id, NOW - 20 * MINUTE])
    expect(await lastEvent(three.id)).toMatchObject({ text: 'Put right: at Fan rack since 09:40.' })
  })

  it('changes nothing where the tree hangs there already', async () => {
    const tree = await hungTree()
    expect(await move(tree.id, slow.id)).toBe(false)
    expect(await move(tree.id, slow.id, { movedAt: NOW - 20 * MINUTE })).toBe(false)
    expect(await lastEvent(tree.id)).toBeUndefined()
  })

  it('lies after the newest dip, which says where the tree hung; a rough time a little before it means right after it', async () => {
    const tree = await hungTree(15 * MINUTE)
    await expect(move(tree.id, fast.id, { movedAt: NOW - 25 * MINUTE })).rejects.toMatchObject({
      code: 'unprocessable',
      extra: { fields: [{ path: 'movedAt', message: expect.stringMatching(/^Coat 1 was dipped at 09:45/) }] },
    })
    await move(tree.id, fast.id, { movedAt: NOW - 20 * MINUTE })
    expect((await stays(tree.id)).at(-1)).toEqual([fast.id, NOW - 15 * MINUTE + 1])
    const bare = await hungTree(null)
    await expect(move(bare.id, fast.id, { member: ines, movedAt: NOW - 30 * HOUR })).rejects.toMatchObject({
      extra: { fields: [{ path: 'movedAt', message: expect.stringMatching(/came onto the floor at Mon 10:00/) }] },
    })
  })

  it('is not told ahead, and over an hour back only by who may correct', async () => {
    const tree = await hungTree()
    await expect(move(tree.id, fast.id, { movedAt: NOW + 3 * MINUTE })).rejects.toMatchObject({ code: 'unprocessable' })
    await expect(move(tree.id, fast.id, { movedAt: NOW - HOUR - 1 })).rejects.toMatchObject({ code: 'forbidden' })
    expect(await move(tree.id, fast.id, { member: ines, movedAt: NOW - 5 * HOUR })).toBe(true)
    // A tablet whose clock runs a little ahead means now.
    await move(tree.id, slow.id, { movedAt: NOW + MINUTE })
    expect((await stays(tree.id)).at(-1)).toEqual([slow.id, NOW])
  })
})
