import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { moveTree } from '@/lib/commands/move-tree'
import { changePlace, createPlace, retirePlace, reusePlace } from '@/lib/commands/save-place'
import { createSensor, retireSensor, reuseSensor } from '@/lib/commands/save-sensor'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadPlaceList } from '@/lib/queries/place-list'
import { loadQueue } from '@/lib/queries/queue'
import { loadTreeForm } from '@/lib/queries/tree-form'
import type { PlaceInput } from '@/lib/room/place-input'
import { FormerAir, Place } from '@/models'
import { buildAir, buildTree, dipBody, HOUR, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

import { fieldRefusal, historyOf, kindsOf, openSettings, placeInputOf } from '@/tests/factories/settings'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })
const placeInput = (overrides?: Partial<PlaceInput>) => placeInputOf(foundry, overrides)

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
})

describe('a place', () => {
  it('is added with its timetable, and the history says by whom', async () => {
    const fans = [1, 2].map((weekday) => ({ weekday, onMinute: 360, offMinute: 1080 }))
    const { placeId } = await createPlace(placeInput({ name: 'Rack A', airSpeedFansOffMps: 0.1, fans }), by())
    const row = (await loadPlaceList({ clock })).inUse.find(({ id }) => id === placeId)
    expect(row).toMatchObject({ name: 'Rack A', fanHours: fans, sensor: { name: 'Shell room' }, trees: [] })
    expect(await historyOf('place', placeId)).toEqual([
      {
        kind: 'place added',
        subjectName: 'Rack A',
        memberId: ines.id,
        device: 'Firefox on Linux',
        at: NOW,
        detail: {
          text: 'Place Rack A added.',
          after: {
            name: 'Rack A',
            airSpeedFansOnMps: 1,
            airSpeedFansOffMps: 0.1,
            fanDutyPct: 100,
            airMeasuredOn: null,
            airMeasuredWith: null,
            airMeasuredBy: null,
            sensor: 'Shell room',
            fans: 'Mon to Tue 06:00–18:00',
          },
        },
      },
    ])
  })

  it('has a name of its own, also among retired ones', async () => {
    const { placeId } = await createPlace(placeInput({ name: 'Rack B' }), by())
    await expect(createPlace(placeInput({ name: 'rack b' }), by())).rejects.toMatchObject(fieldRefusal('name', /a Rack B already/))
    await retirePlace(placeId, by())
    await expect(createPlace(placeInput({ name: 'Rack B' }), by())).rejects.toMatchObject(fieldRefusal('name', /retired/))
    await changePlace((await createPlace(placeInput({ name: 'Rack C' }), by())).placeId, placeInput({ name: 'Rack C' }), 'now', by())
  })

  it('needs a sensor in use', async () => {
    const { sensorId } = await createSensor({ name: 'Old loft', kind: 'logger' }, by())
    await retireSensor(sensorId, by())
    await expect(createPlace(placeInput({ sensorId }), by())).rejects.toMatchObject(fieldRefusal('sensorId', /in use/))
    await expect(createPlace(placeInput({ sensorId: 9999 }), by())).rejects.toMatchObject(fieldRefusal('sensorId', /in use/))
  })

  it('is changed with what was before; nothing changed leaves no line', async () => {
    const input = placeInput()
    const { placeId } = await createPlace(input, by())
    await changePlace(placeId, input, 'now', by())
    expect(await kindsOf('place', placeId)).toEqual(['place added'])
    expect(await FormerAir.count({ where: { placeId } })).toBe(0)
    await changePlace(placeId, { ...input, airSpeedFansOnMps: 2, fans: [{ weekday: 7, onMinute: 0, offMinute: 1440 }] }, 'now', by())
    expect((await historyOf('place', placeId)).at(-1)?.detail).toEqual({
      text: `Place ${input.name} changed, from now on.`,
      before: { airSpeedFansOnMps: 1, fans: 'never on' },
      after: { airSpeedFansOnMps: 2, fans: 'Sun 00:00–24:00' },
    })
    await expect(changePlace(newId(), input, 'now', by())).rejects.toMatchObject({ code: 'not_found' })
  })

  it('is not retired while trees hang there, and says which', async () => {
    const { placeId } = await createPlace(placeInput({ name: 'Long rail' }), by())
    const [one, two] = [await buildTree(foundry, { placeId }), await buildTree(foundry, { placeId })]
    await expect(retirePlace(placeId, by())).rejects.toMatchObject({
      code: 'conflict',
      message: `${[one.tag, two.tag].toSorted().join(' and ')} hang at Long rail. Move them first.`,
    })
    await moveTree(one.id, foundry.placeId, by())
    await expect(retirePlace(placeId, by())).rejects.toMatchObject({ message: `${two.tag} hangs at Long rail. Move it first.` })
    await two.update({ scrappedAt: NOW })
    await retirePlace(placeId, by())
    await expect(retirePlace(placeId, by())).rejects.toMatchObject({ code: 'conflict' })
    expect(await kindsOf('place', placeId)).toEqual(['place added', 'place retired'])
  })

  it('leaves every choice once it is retired, and comes back as it was', async () => {
    const { placeId } = await createPlace(placeInput(), by())
    const tree = await buildTree(foundry)
    const offered = async () => {
      const [{ queue }, form, list] = await Promise.all([
        loadQueue({ clock: { now: () => clock.now() } }),
        loadTreeForm(),
        loadPlaceList({ clock }),
      ])
      return [queue.places, form.places, list.inUse].map((places) => places.some(({ id }) => id === placeId))
    }
    expect(await offered()).toEqual([true, true, true])
    await retirePlace(placeId, by())
    expect(await offered()).toEqual([false, false, false])
    expect((await loadPlaceList({ clock })).retired.some(({ id }) => id === placeId)).toBe(true)
    const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId }])
    await expect(logDips(run, by())).rejects.toMatchObject({ code: 'not_found', extra: { placeId } })
    await expect(moveTree(tree.id, placeId, by())).rejects.toMatchObject({ code: 'not_found' })
    await expect(changePlace(placeId, placeInput(), 'now', by())).rejects.toMatchObject({ code: 'conflict' })
    await reusePlace(placeId, by())
    await reusePlace(placeId, by())
    expect(await offered()).toEqual([true, true, true])
    expect(await kindsOf('place', placeId)).toEqual(['place added', 'place retired', 'place in use again'])
  })

  it('does not come back before its sensor', async () => {
    const { sensorId } = await createSensor({ name: 'Attic', kind: 'logger' }, by())
    const { placeId } = await createPlace(placeInput({ sensorId }), by())
    await retirePlace(placeId, by())
    await retireSensor(sensorId, by())
    await expect(reusePlace(placeId, by())).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('Attic') })
    await reuseSensor(sensorId, by())
    await reusePlace(placeId, by())
    expect((await Place.findByPk(placeId))?.retiredAt).toBeNull()
  })
})

describe('another air at a place where a coat dries', () => {
  /** A tree dipped two hours ago at a place of its own; the moisture ratio of its coat now. */
  async function dryingTree(input: PlaceInput) {
    const { placeId } = await createPlace(input, by())
    const tree = await buildTree(foundry, { placeId, since: NOW - 20 * HOUR })
    const earlier = stoppedClock(NOW - 2 * HOUR)
    await logDips(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId }], { dippedAt: NOW - 2 * HOUR, drainSeconds: 0 }), {
      member: ines,
      clock: earlier,
    })
    const dose = async (now = NOW) => (await loadFloor({ now, trees: { ids: [tree.id] } })).trees[0]!.call!.dose.likely
    return { placeId, dose }
  }

  it('from now on leaves what has dried so far', async () => {
    const input = placeInput()
    const { placeId, dose } = await dryingTree(input)
    const before = await dose()
    // Two hours in 1.0 m/s air of 21 °C and 50 %: two reference hours.
    expect(before).toBeCloseTo(2, 2)
    await changePlace(placeId, { ...input, airSpeedFansOnMps: 4, airSpeedFansOffMps: 4 }, 'now', by())
    expect(await dose()).toBeCloseTo(before, 6)
    expect(await kindsOf('place', placeId)).toEqual(['place added', 'place changed'])
  })

  it('from now on acts in what comes', async () => {
    const input = placeInput()
    const { placeId } = await dryingTree(input)
    const dryAt = async () => (await loadQueue({ clock })).queue.trees.find(({ place }) => place.id === placeId)!.dry!.likelyAt!
    const before = await dryAt()
    await changePlace(placeId, { ...input, airSpeedFansOnMps: 4, airSpeedFansOffMps: 4 }, 'now', by())
    const after = await dryAt()
    expect(after).toBeGreaterThan(NOW)
    // Factor 0.3 + 0.7 √4 = 1.7 for what was left of its 2.5 reference hours.
    expect(after - NOW).toBeCloseTo((before - NOW) / 1.7, -4)
  })

  it('as a correction works the coat out again from its dip', async () => {
    const input = placeInput()
    const { placeId, dose } = await dryingTree(input)
    await changePlace(placeId, { ...input, airSpeedFansOnMps: 4, airSpeedFansOffMps: 4 }, 'always', by())
    expect(await dose()).toBeCloseTo(2 * 1.7, 2)
    expect(await FormerAir.count({ where: { placeId } })).toBe(0)
    expect((await historyOf('place', placeId)).at(-1)?.detail['text']).toMatch(/corrected/)
  })

  it('by another sensor reads its air from the change on, and the former sensor may be retired', async () => {
    const { sensorId: former } = await createSensor({ name: 'North post', kind: 'logger' }, by())
    const { sensorId: latter } = await createSensor({ name: 'South post', kind: 'logger' }, by())
    await buildAir(former, NOW - 3 * HOUR, NOW)
    // Saturated: no drying at all.
    await buildAir(latter, NOW - 3 * HOUR, NOW, { airTempC: 21, relHumidityPct: 100 })
    const input = placeInput({ sensorId: former })
    const { placeId, dose } = await dryingTree(input)
    await changePlace(placeId, { ...input, sensorId: latter }, 'now', by())
    await retireSensor(former, by())
    expect(await dose()).toBeCloseTo(2, 2)
    await buildAir(latter, NOW + 5 * 60_000, NOW + HOUR, { airTempC: 21, relHumidityPct: 100 })
    expect(await dose(NOW + HOUR)).toBeCloseTo(2, 2)
    expect(await FormerAir.findAll({ where: { placeId } })).toMatchObject([{ until: NOW, sensorId: former }])
  })
})
