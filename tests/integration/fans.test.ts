import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { changePlace, createPlace, retirePlace } from '@/lib/commands/save-place'
import { switchFans } from '@/lib/commands/switch-fans'
import { newId } from '@/lib/core/ids'
import { fanFactors, placeFactor } from '@/lib/drying/place-factor'
import type { FanState } from '@/lib/drying/types'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadFanSwitches } from '@/lib/queries/load-fan-switches'
import { loadHistory } from '@/lib/queries/history'
import { loadQueue } from '@/lib/queries/queue'
import { loadRoomPage } from '@/lib/queries/room'
import type { PlaceInput } from '@/lib/room/place-input'
import { FanSwitch, FormerAir } from '@/models'
import { plansOf } from '@/tests/factories/plans'
import { fieldRefusal, historyOf, openSettings, placeInputOf } from '@/tests/factories/settings'
import { buildAir, buildMember, buildTree, dipBody, HOUR, MINUTE, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

// NOW is Tuesday 13 October 2026, 10:00 in London; the fans run from 07:00 to 18:00 every day. The air is one reference hour an hour.
const SEA_LEVEL_PA = 101_325
const ON = placeFactor(1.5, SEA_LEVEL_PA)
const OFF = placeFactor(0.1, SEA_LEVEL_PA)
const DAILY = [1, 2, 3, 4, 5, 6, 7].map((weekday) => ({ weekday, onMinute: 420, offMinute: 1080 }))

let foundry: TestFoundry
let ines: Actor
let maud: Actor
const by = (at = NOW) => ({ member: ines, clock: stoppedClock(at) })

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
  maud = await buildMember('operator', 'Maud')
  await buildAir(foundry.sensorId, NOW, NOW + 48 * HOUR)
})

const fanInput = (overrides: Partial<PlaceInput> = {}) =>
  placeInputOf(foundry, { airSpeedFansOnMps: 1.5, airSpeedFansOffMps: 0.1, fans: DAILY, ...overrides })

/** A place of its own, and a tree dipped there two hours ago. */
async function dryingTree(input = fanInput()) {
  const { placeId } = await createPlace(input, by(NOW - 20 * HOUR))
  const tree = await buildTree(foundry, { placeId, since: NOW - 20 * HOUR })
  const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId }], { dippedAt: NOW - 2 * HOUR, drainSeconds: 0 })
  await logDips(run, by(NOW - 2 * HOUR))
  const call = async (now: number) => (await loadFloor({ now, trees: { ids: [tree.id] } })).trees[0]!.call!
  return { placeId, tree, call, dose: async (now: number) => (await call(now)).dose.likely }
}

const say = (placeId: string, state: FanState, at = NOW, operationId = newId()) =>
  switchFans(placeId, { operationId, state }, { member: maud, clock: stoppedClock(at) })
const fansOf = async (placeId: string, now: number) =>
  (await loadQueue({ clock: { now: () => now } })).queue.places.find(({ id }) => id === placeId)?.fans

describe('the fans of a place', () => {
  it('are said to be off: from that moment to the next switch of the timetable the coat dries in still air', async () => {
    const { placeId, call, dose } = await dryingTree()
    const likelyAt = (await call(NOW)).likelyAt ?? 0
    expect((await say(placeId, 'off')).response).toEqual({ placeId, isOn: false, until: NOW + 8 * HOUR })
    expect((await call(NOW)).likelyAt).toBeGreaterThan(likelyAt)
    expect(await dose(NOW)).toBeCloseTo(2 * ON, 3)
    expect(await dose(NOW + 1.5 * HOUR)).toBeCloseTo(2 * ON + 1.5 * OFF, 3)
    expect(await fansOf(placeId, NOW)).toEqual({ isOn: false, until: NOW + 8 * HOUR, said: { at: NOW, by: 'Maud' } })
    // The timetable has them again from 18:00, off, and on from 07:00.
    expect(await fansOf(placeId, NOW + 9 * HOUR)).toEqual({ isOn: false, until: NOW + 21 * HOUR, said: null })
    expect(await fansOf(placeId, NOW + 22 * HOUR)).toEqual({ isOn: true, until: NOW + 32 * HOUR, said: null })
  })

  it('go back to the timetable by a second touch, which leaves the time in between', async () => {
    const { placeId, dose } = await dryingTree()
    await say(placeId, 'off')
    await say(placeId, 'on', NOW + 10 * MINUTE)
    expect(await dose(NOW + HOUR)).toBeCloseTo(2 * ON + OFF / 6 + (ON * 5) / 6, 3)
    expect(await fansOf(placeId, NOW + HOUR)).toMatchObject({ isOn: true, until: NOW + 8 * HOUR, said: { at: NOW + 10 * MINUTE } })
    await say(placeId, 'timetable', NOW + HOUR)
    expect(await fansOf(placeId, NOW + HOUR)).toEqual({ isOn: true, until: NOW + 8 * HOUR, said: null })
    expect(await FanSwitch.count({ where: { placeId } })).toBe(3)
  })

  it('are left on across midnight, and dry the coat through the night', async () => {
    const { placeId, dose } = await dryingTree()
    const [evening, night] = [NOW + 8 * HOUR + 5 * MINUTE, NOW + 16 * HOUR]
    await say(placeId, 'on', evening)
    expect(await dose(night)).toBeCloseTo(2 * ON + 8 * ON + OFF / 12 + ((night - evening) / HOUR) * ON, 3)
    expect(await fansOf(placeId, night)).toMatchObject({ isOn: true, until: NOW + 21 * HOUR, said: { by: 'Maud' } })
  })

  it('say what is so already, or the same once more, and nothing changes', async () => {
    const { placeId } = await dryingTree()
    const operationId = newId()
    for (const state of ['on', 'timetable'] as const) await say(placeId, state)
    expect(await FanSwitch.count({ where: { placeId } })).toBe(0)
    const first = await say(placeId, 'off', NOW, operationId)
    const again = await say(placeId, 'off', NOW + MINUTE, operationId)
    expect(again).toMatchObject({ response: first.response, replayed: true })
    await say(placeId, 'off', NOW + 2 * MINUTE)
    expect(await FanSwitch.count({ where: { placeId } })).toBe(1)
    await expect(say(placeId, 'on', NOW, operationId)).rejects.toMatchObject({ code: 'unprocessable' })
  })

  it('are told in the history, with what was before', async () => {
    const { placeId } = await dryingTree(fanInput({ name: 'Fan rack' }))
    await say(placeId, 'off')
    await say(placeId, 'timetable', NOW + MINUTE)
    const lines = (await historyOf('place', placeId)).slice(1)
    expect(lines.map(({ detail }) => detail)).toEqual([
      {
        text: 'Fans of Fan rack switched off, until 18:00, then by the timetable.',
        before: { fans: 'on, by the timetable' },
        after: { fans: 'off, as told' },
      },
      {
        text: 'Fans of Fan rack by the timetable again: on now.',
        before: { fans: 'off, as told' },
        after: { fans: 'on, by the timetable' },
      },
    ])
    expect(lines.map(({ kind, memberId }) => [kind, memberId])).toEqual([1, 2].map(() => ['fans switched', maud.id]))
  })

  it('are no matter where the air is the same, the place is retired or unknown', async () => {
    const same = await createPlace(placeInputOf(foundry), by())
    await expect(say(same.placeId, 'on')).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('the same air') })
    const swings = await createPlace(fanInput({ fanDuty: 0 }), by())
    await expect(say(swings.placeId, 'on')).rejects.toMatchObject({ code: 'conflict' })
    const gone = await createPlace(fanInput(), by())
    await retirePlace(gone.placeId, by())
    await expect(say(gone.placeId, 'off')).rejects.toMatchObject({ code: 'not_found' })
    await expect(say(newId(), 'off')).rejects.toMatchObject({ code: 'not_found' })
  })

  it('may be on where there is no timetable, until somebody says otherwise', async () => {
    const { placeId, dose } = await dryingTree(fanInput({ fans: [] }))
    await say(placeId, 'on')
    expect(await dose(NOW + 30 * HOUR)).toBeCloseTo(2 * OFF + 30 * ON, 2)
    expect(await fansOf(placeId, NOW + 30 * HOUR)).toMatchObject({ isOn: true, until: null })
  })

  it('keep a word through a change of the air, and what dried before keeps the air before', async () => {
    const input = fanInput()
    const { placeId, dose } = await dryingTree(input)
    await say(placeId, 'off')
    await changePlace(placeId, { ...input, airSpeedFansOffMps: 0.5, fanDuty: 0.4 }, 'now', by(NOW + HOUR))
    expect(await dose(NOW + 2 * HOUR)).toBeCloseTo(2 * ON + OFF + placeFactor(0.5, SEA_LEVEL_PA), 3)
    await say(placeId, 'on', NOW + 2 * HOUR)
    const swinging = fanFactors({ ...input, airSpeedFansOffMps: 0.5, fanDuty: 0.4, fanHours: [] }, SEA_LEVEL_PA).on
    expect(await dose(NOW + 3 * HOUR)).toBeCloseTo(2 * ON + OFF + placeFactor(0.5, SEA_LEVEL_PA) + swinging, 3)
    expect(await FormerAir.findAll({ where: { placeId }, attributes: ['fanDuty', 'until'], raw: true })).toEqual([
      { fanDuty: 1, until: NOW + HOUR },
    ])
  })

  it('stand on the Room page with the air at the trees', async () => {
    const { placeId } = await dryingTree(fanInput({ fanDuty: 0.3 }))
    const now = async () =>
      (await loadRoomPage({ sensorId: null, range: '48h', tempUnit: 'degC', clock: stoppedClock() })).placesNow.find(
        ({ id }) => id === placeId,
      )
    expect(await now()).toMatchObject({ treeCount: 1, speed: '1.5 m/s for 30 % of the time, else 0.1 m/s', fans: { isOn: true } })
    await say(placeId, 'off')
    expect(await now()).toMatchObject({ speed: '0.1 m/s', fans: { isOn: false, said: { by: 'Maud' } } })
  })

  it('are read along the index, the last word before the time in use among them', async () => {
    const { placeId } = await createPlace(fanInput({ fans: [] }), by())
    await FanSwitch.bulkCreate(
      Array.from({ length: 400 }, (_, index) => {
        const state = index % 2 === 0 ? ('on' as const) : ('off' as const)
        return { placeId, at: NOW - (400 - index) * 24 * HOUR, state, memberId: maud.id, operationId: newId() }
      }),
    )
    let switches: Awaited<ReturnType<typeof loadFanSwitches>> = new Map()
    const plans = await plansOf(async () => {
      switches = await loadFanSwitches(NOW - 2.5 * 24 * HOUR)
    })
    expect(switches.get(placeId)?.map(({ at }) => (NOW - at) / (24 * HOUR))).toEqual([3, 2, 1])
    expect(plans).toHaveLength(1)
    expect(plans[0]?.plan).toContain('SEARCH s USING INDEX fan_switches_place (place_id=? AND at>?)')
    expect(plans[0]?.plan).not.toMatch(/SCAN [sl]\b/)
  })

  it('are only added to', async () => {
    await expect(FanSwitch.update({ state: 'on' }, { where: {} })).rejects.toMatchObject({
      parent: { message: 'SQLITE_CONSTRAINT: a switch of the fans is only added' },
    })
  })
})

describe('the air speed of a place', () => {
  it('is an estimate until it is measured, and a measurement splits nothing', async () => {
    const input = fanInput({ name: 'Long rack' })
    const { placeId } = await createPlace(input, by())
    const measured = { airMeasuredOn: '2026-10-12', airMeasuredWith: 'vane meter', airMeasuredBy: 'Maud' } as const
    await changePlace(placeId, { ...input, ...measured }, 'now', by())
    expect((await historyOf('place', placeId)).at(-1)?.detail).toEqual({
      text: 'Place Long rack: how its air speeds are known.',
      before: { airMeasuredOn: null, airMeasuredWith: null, airMeasuredBy: null },
      after: measured,
    })
    expect(await FormerAir.count({ where: { placeId } })).toBe(0)
    const future = { ...input, airMeasuredOn: '2026-10-14' }
    await expect(changePlace(placeId, future, 'now', by())).rejects.toMatchObject(fieldRefusal('airMeasuredOn', /has not come yet/))
    await expect(createPlace({ ...future, name: 'Other' }, by())).rejects.toMatchObject(fieldRefusal('airMeasuredOn', /has not come yet/))
  })

  it('has a line of history that a person reads', async () => {
    const page = await loadHistory(
      { memberId: maud.id, tag: null, kind: 'fans switched', fromDay: null, toDay: null },
      { cursor: null, timeZone: 'Europe/London' },
    )
    expect(page.lines[0]?.text).toMatch(/^Fans of /)
  })
})
