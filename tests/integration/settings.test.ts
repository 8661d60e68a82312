import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { moveTree } from '@/lib/commands/move-tree'
import { issueSensorToken } from '@/lib/commands/issue-sensor-token'
import { revokeSensorToken } from '@/lib/commands/revoke-sensor-token'
import { changeBath, createBath, retireBath, reuseBath } from '@/lib/commands/save-bath'
import { addClosure, changeClosure, removeClosure } from '@/lib/commands/save-closure'
import { saveFoundry } from '@/lib/commands/save-foundry'
import { changePlace, createPlace, retirePlace, reusePlace } from '@/lib/commands/save-place'
import { createSensor, renameSensor, retireSensor, reuseSensor } from '@/lib/commands/save-sensor'
import { saveShiftHours } from '@/lib/commands/save-shift-hours'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadBathList } from '@/lib/queries/bath-list'
import { loadHoursAndClosedDays } from '@/lib/queries/closed-days'
import { loadFloor } from '@/lib/queries/floor'
import { loadFoundrySettings } from '@/lib/queries/foundry-settings'
import { loadPlaceList } from '@/lib/queries/place-list'
import { loadQueue } from '@/lib/queries/queue'
import { loadSensorList } from '@/lib/queries/sensor-list'
import { loadTreeForm } from '@/lib/queries/tree-form'
import type { PlaceInput } from '@/lib/room/place-input'
import { Bath, DoseHour, FormerAir, FoundryEvent, Place, Reading, Recipe, RecipeVersion, Sensor, SensorToken, ShiftHours } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildRecipe,
  buildTree,
  dipBody,
  HOUR,
  NOW,
  stoppedClock,
  type TestFoundry,
} from '@/tests/factories/shell-room'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = { ...(await buildMember('owner', 'Ines')), device: 'Firefox on Linux' }
  await buildAir(foundry.sensorId, NOW - 30 * HOUR, NOW)
})

/** The lines of one subject, oldest first. */
async function historyOf(subjectType: string, subjectId?: string) {
  const rows = await FoundryEvent.findAll({ where: { subjectType, ...(subjectId !== undefined && { subjectId }) }, order: [['id', 'ASC']] })
  return rows.map(({ kind, subjectName, memberId, device, at, detail }) => ({ kind, subjectName, memberId, device, at, detail }))
}
const kindsOf = async (subjectType: string, subjectId?: string) => (await historyOf(subjectType, subjectId)).map(({ kind }) => kind)

const fieldRefusal = (path: string, words: RegExp) => ({
  code: 'conflict',
  extra: { fields: [{ path, message: expect.stringMatching(words) }] },
})

let count = 0
const placeInput = (overrides: Partial<PlaceInput> = {}): PlaceInput => ({
  name: `Rail ${(count += 1)}`,
  sensorId: foundry.sensorId,
  airSpeedFansOnMps: 1,
  airSpeedFansOffMps: 1,
  fans: [],
  ...overrides,
})

describe('a place', () => {
  it('is added with its timetable, and the history says by whom', async () => {
    const fans = [1, 2].map((weekday) => ({ weekday, onMinute: 360, offMinute: 1080 }))
    const { placeId } = await createPlace(placeInput({ name: 'Rack A', airSpeedFansOffMps: 0.1, fans }), by())
    const row = (await loadPlaceList()).inUse.find(({ id }) => id === placeId)
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
          after: { name: 'Rack A', airSpeedFansOnMps: 1, airSpeedFansOffMps: 0.1, sensor: 'Shell room', fans: 'Mon to Tue 06:00–18:00' },
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
      const [{ queue }, form, list] = await Promise.all([loadQueue({ clock: { now: () => clock.now() } }), loadTreeForm(), loadPlaceList()])
      return [queue.places, form.places, list.inUse].map((places) => places.some(({ id }) => id === placeId))
    }
    expect(await offered()).toEqual([true, true, true])
    await retirePlace(placeId, by())
    expect(await offered()).toEqual([false, false, false])
    expect((await loadPlaceList()).retired.some(({ id }) => id === placeId)).toBe(true)
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

describe('a bath', () => {
  it('is added, renamed and moved to other coats, each with its line', async () => {
    const { bathId } = await createBath({ name: 'Silica', kind: 'face' }, by())
    await changeBath(bathId, { name: 'Zircon', kind: 'backup' }, by())
    await changeBath(bathId, { name: 'Zircon', kind: 'backup' }, by())
    expect((await historyOf('bath', bathId)).map(({ kind, detail }) => ({ kind, ...detail }))).toEqual([
      { kind: 'bath added', text: 'Bath Silica added.', after: { name: 'Silica', kind: 'face' } },
      {
        kind: 'bath changed',
        text: 'Bath Zircon changed.',
        before: { name: 'Silica', kind: 'face' },
        after: { name: 'Zircon', kind: 'backup' },
      },
    ])
    await expect(createBath({ name: 'ZIRCON', kind: 'face' }, by())).rejects.toMatchObject(fieldRefusal('name', /a Zircon already/))
    await expect(changeBath(newId(), { name: 'X', kind: 'face' }, by())).rejects.toMatchObject({ code: 'not_found' })
  })

  it('is not retired while the newest version of a recipe in use needs it', async () => {
    const { bathId } = await createBath({ name: 'Fine', kind: 'face' }, by())
    const versionId = await buildRecipe({ ...foundry, faceBathId: bathId })
    const version = await RecipeVersion.findByPk(versionId, { rejectOnEmpty: true })
    const recipe = await Recipe.findByPk(version.recipeId, { rejectOnEmpty: true })
    await expect(retireBath(bathId, by())).rejects.toMatchObject({
      code: 'conflict',
      message: expect.stringContaining(`‘${recipe.name}’ needs Fine`),
    })
    // A newer version without it sets it free, but not from a tree that was begun with the older one.
    await RecipeVersion.create({ id: newId(), recipeId: recipe.id, version: 2, createdAt: NOW })
    const tree = await buildTree(foundry, { recipeVersionId: versionId })
    await expect(retireBath(bathId, by())).rejects.toMatchObject({
      code: 'conflict',
      message: `${tree.tag} still has a coat to come from Fine.`,
    })
    await tree.update({ scrappedAt: NOW })
    await retireBath(bathId, by())
    expect((await loadBathList()).retired.map(({ id }) => id)).toContain(bathId)
    expect((await loadQueue({ clock })).queue.baths.map(({ id }) => id)).not.toContain(bathId)
    await expect(changeBath(bathId, { name: 'Fine', kind: 'face' }, by())).rejects.toMatchObject({ code: 'conflict' })
    await reuseBath(bathId, by())
    expect((await loadBathList()).inUse.map(({ id }) => id)).toContain(bathId)
    expect(await kindsOf('bath', bathId)).toEqual(['bath added', 'bath retired', 'bath in use again'])
  })

  it('of a retired recipe may go', async () => {
    const { bathId } = await createBath({ name: 'Old slurry', kind: 'face' }, by())
    const version = await RecipeVersion.findByPk(await buildRecipe({ ...foundry, faceBathId: bathId }), { rejectOnEmpty: true })
    await Recipe.update({ retiredAt: NOW }, { where: { id: version.recipeId } })
    await retireBath(bathId, by())
    expect((await Bath.findByPk(bathId))?.retiredAt).toBe(NOW)
  })
})

describe('a sensor', () => {
  it('is added, renamed and listed with its newest reading and its places', async () => {
    const { sensorId } = await createSensor({ name: 'Loft', kind: 'logger' }, by())
    await renameSensor(sensorId, { name: 'Net loft' }, by())
    await buildAir(sensorId, NOW - HOUR, NOW, { airTempC: 18, relHumidityPct: 60 })
    const { placeId } = await createPlace(placeInput({ name: 'Loft rail', sensorId }), by())
    expect((await loadSensorList()).inUse.find(({ id }) => id === sensorId)).toMatchObject({
      name: 'Net loft',
      newest: { measuredAt: NOW, airTempC: 18, relHumidityPct: 60 },
      places: ['Loft rail'],
    })
    expect((await historyOf('sensor', String(sensorId))).at(-1)?.detail).toMatchObject({
      before: { name: 'Loft' },
      after: { name: 'Net loft' },
    })
    await expect(retireSensor(sensorId, by())).rejects.toMatchObject({ code: 'conflict', message: expect.stringContaining('Loft rail') })
    await retirePlace(placeId, by())
    await retireSensor(sensorId, by())
    await expect(createSensor({ name: 'net Loft', kind: 'logger' }, by())).rejects.toMatchObject(
      fieldRefusal('name', /retired sensor is called Net loft/),
    )
    await expect(renameSensor(sensorId, { name: 'X' }, by())).rejects.toMatchObject({ code: 'conflict' })
  })

  it('has tokens whose lines in the history hold their id and nothing that speaks for it', async () => {
    const { sensorId } = await createSensor({ name: 'Post', kind: 'logger' }, by())
    const { id, token } = await issueSensorToken({ sensorId }, by())
    await revokeSensorToken({ tokenId: id }, by())
    await revokeSensorToken({ tokenId: id }, by())
    const lines = await historyOf('sensor', String(sensorId))
    expect(lines.map(({ kind }) => kind)).toEqual(['sensor added', 'token issued', 'token revoked'])
    const secret = token.split('_').slice(2).join('_')
    const stored = await SensorToken.findByPk(id)
    for (const text of [JSON.stringify(lines), JSON.stringify(await loadSensorList())]) {
      expect(text).toContain(id)
      expect(text).not.toContain(secret)
      expect(text).not.toContain(stored?.secretSha256)
    }
  })

  it('that is retired loses its tokens for good', async () => {
    const { sensorId } = await createSensor({ name: 'Corner', kind: 'logger' }, by())
    await issueSensorToken({ sensorId }, by())
    await retireSensor(sensorId, by())
    await expect(issueSensorToken({ sensorId }, by())).rejects.toMatchObject({ code: 'conflict' })
    await reuseSensor(sensorId, by())
    const row = (await loadSensorList()).inUse.find(({ id }) => id === sensorId)
    expect(row?.tokens.map(({ revokedAt }) => revokedAt)).toEqual([NOW])
    expect(await kindsOf('sensor', String(sensorId))).toEqual([
      'sensor added',
      'token issued',
      'token revoked',
      'sensor retired',
      'sensor in use again',
    ])
  })
})

describe('hours and closed days', () => {
  it('are kept with what was before', async () => {
    const hours = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: weekday === 5 ? 480 : 420, closesMinute: 1020 }))
    await saveShiftHours([...hours, { weekday: 6, opensMinute: 480, closesMinute: 720 }], by())
    await saveShiftHours([...hours, { weekday: 6, opensMinute: 480, closesMinute: 720 }], by())
    expect((await historyOf('hours')).map(({ detail }) => detail)).toEqual([
      {
        text: 'Shift hours changed.',
        before: { Friday: '07:00–17:00', Saturday: 'closed' },
        after: { Friday: '08:00–17:00', Saturday: '08:00–12:00' },
      },
    ])
    expect(await ShiftHours.count()).toBe(6)
    await saveShiftHours(
      hours.map((row) => ({ ...row, opensMinute: 420 })),
      by(),
    )
  })

  it('are added, changed and removed', async () => {
    const { closureId } = await addClosure({ name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-03' }, by())
    await changeClosure(closureId, { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, by())
    await removeClosure(closureId, by())
    expect(
      (await historyOf('closure', closureId)).map(({ kind, detail }) => ({ kind, before: detail['before'], after: detail['after'] })),
    ).toEqual([
      { kind: 'closed days added', before: undefined, after: { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-03' } },
      { kind: 'closed days changed', before: { lastDay: '2026-11-03' }, after: { lastDay: '2026-11-04' } },
      { kind: 'closed days removed', before: { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, after: undefined },
    ])
    await expect(removeClosure(closureId, by())).rejects.toMatchObject({ code: 'not_found' })
    await expect(changeClosure(closureId, { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, by())).rejects.toMatchObject({
      code: 'not_found',
    })
  })

  it('come with the next first, those that are over apart', async () => {
    const add = (name: string, firstDay: string, lastDay: string) => addClosure({ name, firstDay, lastDay }, by())
    const added = [
      await add('Winter', '2026-12-24', '2027-01-03'),
      await add('Today', '2026-10-12', '2026-10-13'),
      await add('Summer', '2026-08-03', '2026-08-21'),
      await add('Whitsun', '2026-05-25', '2026-05-25'),
    ]
    const { upcoming, past } = await loadHoursAndClosedDays({ clock })
    expect(upcoming.map(({ name, isNow }) => [name, isNow])).toEqual([
      ['Today', true],
      ['Winter', false],
    ])
    expect(past.map(({ name }) => name)).toEqual(['Summer', 'Whitsun'])
    for (const { closureId } of added) await removeClosure(closureId, by())
  })

  it('move the tide, the next dip and the pour with them', async () => {
    const tree = await buildTree(foundry, { pourDate: '2026-10-21' })
    const seen = async () => {
      const { queue } = (await loadQueue({ clock })) ?? {}
      const [derived] = (await loadFloor({ now: NOW, trees: { ids: [tree.id] } })).trees
      return { nextStartsAt: queue.shift.nextStartsAt, first: derived!.plannedDips[0]!.likelyAt, willMiss: derived!.willMissPour }
    }
    const open = await seen()
    expect(new Date(open.nextStartsAt).toISOString()).toBe('2026-10-14T06:00:00.000Z')
    expect(open.first).toBe(NOW)
    expect(open.willMiss).toBe(false)
    // Closed from today on for three weeks, over the end of summer time.
    const { closureId } = await addClosure({ name: 'Flood', firstDay: '2026-10-13', lastDay: '2026-11-03' }, by())
    const closed = await seen()
    expect(new Date(closed.nextStartsAt).toISOString()).toBe('2026-11-04T07:00:00.000Z')
    expect(closed.first).toBe(closed.nextStartsAt)
    expect(closed.willMiss).toBe(true)
    await removeClosure(closureId, by())
    expect(await seen()).toEqual(open)
  })
})

describe('the settings of the foundry', () => {
  it('are changed with what was before', async () => {
    const before = await loadFoundrySettings()
    await saveFoundry(before, by())
    expect(await kindsOf('foundry')).toEqual([])
    await saveFoundry({ ...before, name: 'High Moor', tempUnit: 'degF', bandHighTempC: 24 }, by())
    expect(await historyOf('foundry')).toMatchObject([
      {
        kind: 'settings changed',
        subjectName: 'High Moor',
        detail: {
          before: { name: 'Test foundry', tempUnit: 'degC', bandHighTempC: 23 },
          after: { name: 'High Moor', tempUnit: 'degF', bandHighTempC: 24 },
        },
      },
    ])
    await saveFoundry(before, by())
  })

  it('with another altitude leave the readings that are stored, and act on the next', async () => {
    const { sensorId } = await createSensor({ name: 'Summit', kind: 'logger' }, by())
    await buildAir(sensorId, NOW - HOUR, NOW - HOUR)
    const before = await loadFoundrySettings()
    const stored = await Reading.findOne({ where: { sensorId }, rejectOnEmpty: true })
    const hours = await DoseHour.findAll({ where: { sensorId }, raw: true })
    await saveFoundry({ ...before, altitudeM: 2000 }, by())
    expect((await Reading.findOne({ where: { sensorId }, rejectOnEmpty: true })).roomFactor).toBe(stored.roomFactor)
    expect(await DoseHour.findAll({ where: { sensorId }, raw: true })).toEqual(hours)
    await buildAir(sensorId, NOW, NOW)
    const [old, fresh] = await Reading.findAll({ where: { sensorId }, order: [['measuredAt', 'ASC']] })
    expect(old!.roomFactor).toBe(stored.roomFactor)
    // Thinner air cools a wet coat further.
    expect(fresh!.roomFactor).toBeGreaterThan(stored.roomFactor * 1.02)
    await saveFoundry(before, by())
  })

  it('at the lowest and the highest place of the form can be read again', async () => {
    const before = await loadFoundrySettings()
    for (const altitudeM of [-430, 5000]) {
      await saveFoundry({ ...before, altitudeM }, by())
      expect((await loadFloor({ now: NOW, trees: { on: 'floor' } })).foundry.pressurePa).toBeGreaterThan(50_000)
    }
    await saveFoundry(before, by())
  })
})

it('of a demo member is demo data', async () => {
  const demo = { member: { ...ines, isDemo: true }, clock }
  const { sensorId } = await createSensor({ name: 'Demo logger', kind: 'logger' }, demo)
  const { placeId } = await createPlace(placeInput({ sensorId }), demo)
  const { bathId } = await createBath({ name: 'Demo slurry', kind: 'face' }, demo)
  expect([await Sensor.findByPk(sensorId), await Place.findByPk(placeId), await Bath.findByPk(bathId)].map((row) => row?.isDemo)).toEqual([
    true,
    true,
    true,
  ])
  expect(await FoundryEvent.count({ where: { isDemo: true } })).toBe(3)
})
