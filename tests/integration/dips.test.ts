import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { holdTree } from '@/lib/commands/hold-tree'
import { recordReadings } from '@/lib/commands/record-readings'
import { undoDips } from '@/lib/commands/undo-dips'
import { dipRunAnswer } from '@/lib/coats/dip-contract'
import type { AppError } from '@/lib/core/errors'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { Coat, Notice, Sensor, Tree, TreeEvent, TreePlace } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildPlace,
  buildRecipe,
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
let wren: Actor
let ines: Actor

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator', 'Maud')
  wren = await buildMember('operator', 'Wren')
  ines = await buildMember('supervisor', 'Ines')
  await buildAir(foundry.sensorId, NOW - 48 * HOUR, NOW + 24 * HOUR)
})

const refusal = async (work: Promise<unknown>): Promise<AppError> =>
  work.then(
    () => {
      throw new Error('It was not refused.')
    },
    (error: AppError) => error,
  )

const log = async (body: ReturnType<typeof dipBody>, member = maud, at = NOW) => {
  const answer = await logDips(body, { member, clock: stoppedClock(at) })
  return { ...answer, coats: dipRunAnswer.parse(answer.response).coats }
}

describe('logging a run of dips', () => {
  it('puts a coat on each tree of the run, with its forecast and the air at the dip', async () => {
    const [one, two] = [await buildTree(foundry), await buildTree(foundry)]
    const { coats } = await log(
      dipBody(foundry, [
        { treeId: one.id, coatNumber: 1 },
        { treeId: two.id, coatNumber: 1 },
      ]),
    )
    expect(coats.map((coat) => [coat.tag, coat.number, coat.deviations])).toEqual([
      [one.tag, 1, []],
      [two.tag, 1, []],
    ])
    const stored = await Coat.findByPk(coats[0]!.coatId, { rejectOnEmpty: true })
    expect(stored).toMatchObject({ airTempC: 21, relHumidityPct: 50, needReferenceHours: 2.5, moistureRatioBelow: 0, kind: 'face' })
    // 21 °C, 50 %, 1.0 m/s is one reference hour an hour: 2.5 h after the stucco, within a minute.
    expect(Math.abs(stored.forecastP50At! - (NOW + 60_000 + 2.5 * HOUR))).toBeLessThan(MINUTE)
    expect(stored.forecastP90At! - NOW).toBeGreaterThan(3.3 * HOUR)
  })

  it('answers a repeat of the same operation with the same coats, and logs nothing more', async () => {
    const tree = await buildTree(foundry)
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }])
    const first = await log(body)
    const second = await log(body)
    expect(second.replayed).toBe(true)
    expect(second.coats).toEqual(first.coats)
    expect(await Coat.count({ where: { treeId: tree.id } })).toBe(1)
  })

  it('refuses the same operation id for another body', async () => {
    const tree = await buildTree(foundry)
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }])
    await log(body)
    expect((await refusal(log({ ...body, drainSeconds: 45 }))).code).toBe('unprocessable')
  })

  it('is whole or nothing: a refused tree is named with who and when, and the other gets no coat', async () => {
    const [done, fresh] = [await buildTree(foundry), await buildTree(foundry)]
    await log(dipBody(foundry, [{ treeId: done.id, coatNumber: 1 }]), wren)
    const error = await refusal(
      log(
        dipBody(foundry, [
          { treeId: done.id, coatNumber: 1 },
          { treeId: fresh.id, coatNumber: 1 },
        ]),
      ),
    )
    expect(error.code).toBe('conflict')
    expect(error.extra['trees']).toMatchObject([{ treeId: done.id, reason: 'coat already on', by: 'Wren', at: NOW }])
    expect(await Coat.count({ where: { treeId: fresh.id } })).toBe(0)
  })

  it('refuses a coat that skips one, a time ahead of the clock and a time before the coat below', async () => {
    const tree = await buildTree(foundry)
    expect((await refusal(log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 2 }])))).extra['trees']).toMatchObject([
      { reason: 'coat skipped' },
    ])
    const ahead = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }], { dippedAt: NOW + 3 * MINUTE })
    expect((await refusal(log(ahead))).code).toBe('unprocessable')
    await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    const below = dipBody(foundry, [{ treeId: tree.id, coatNumber: 2 }], { dippedAt: NOW - HOUR })
    expect((await refusal(log(below))).code).toBe('unprocessable')
  })

  it('records what was unusual instead of refusing it: early, held, other bath and stucco', async () => {
    const tree = await buildTree(foundry)
    await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    await holdTree(tree.id, 'Crack at the cup.', { member: maud, clock: stoppedClock(NOW) })
    const at = NOW + HOUR
    const { coats } = await log(
      dipBody(foundry, [{ treeId: tree.id, coatNumber: 2, reason: 'Already in the bath' }], { dippedAt: at, stucco: 'coarse' }),
      maud,
      at,
    )
    expect(coats[0]!.deviations).toEqual(['held', 'still wet', 'other bath', 'other stucco'])
    const stored = await Coat.findByPk(coats[0]!.coatId, { rejectOnEmpty: true })
    expect(stored.reason).toBe('Already in the bath')
    // One of 2.5 reference hours: MR = 0.1^((0.983/2.5)^1.1), carried at half its weight; coarse for medium 1.15.
    const below = 0.1 ** (((1 - 1 / 60) / 2.5) ** 1.1)
    expect(Math.abs(stored.needReferenceHours - 4 * 1.15 * (1 + 0.5 * stored.moistureRatioBelow))).toBeLessThan(1e-9)
    expect(Math.abs(stored.moistureRatioBelow - below)).toBeLessThan(0.002)
    const covered = await Coat.findOne({ where: { treeId: tree.id, number: 1 }, rejectOnEmpty: true })
    expect(covered).toMatchObject({ coveredAt: at, meanRelHumidityPct: expect.closeTo(50, 6), worstRelHumidityPct: 50 })
  })

  it('calls a dip early until the guard of the coat below, as the sheet does: likely dry is not safe under a face coat', async () => {
    const tree = await buildTree(foundry)
    await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    // Likely after 2.5 h, safe after 3.44 h.
    const at = NOW + 3 * HOUR
    const [derived] = (await loadFloor({ now: at, trees: { ids: [tree.id] } })).trees
    expect(derived!.warnings.map((warning) => warning.code)).toContain('still wet')
    const backup = { bathId: foundry.backupBathId, stucco: 'medium', dippedAt: at } as const
    const { coats } = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 2, reason: 'Feels dry' }], backup), maud, at)
    expect(coats[0]!.deviations).toEqual(['still wet'])
    expect(await Notice.count({ where: { kind: 'deviation', subjectId: coats[0]!.coatId } })).toBe(1)
  })

  it('moves the tree to the place it was hung at, from the dip on', async () => {
    const tree = await buildTree(foundry)
    const corner = await buildPlace({ sensorId: foundry.sensorId, airSpeedMps: 0.1 })
    const { coats } = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: corner.id }]))
    const [derived] = (await loadFloor({ now: NOW + HOUR, trees: { ids: [tree.id] } })).trees
    // Still air: phi(0.1 m/s) = 0.5214 at sea level.
    expect(Math.abs(derived!.call!.dose.likely - 0.5214 * (59 / 60))).toBeLessThan(0.002)
    await undoDips({ operationId: newId(), coatIds: [coats[0]!.coatId] }, { member: maud, clock: stoppedClock(NOW + MINUTE) })
    expect(await TreePlace.count({ where: { treeId: tree.id, withdrawnAt: null } })).toBe(1)
  })

  it('takes temperature and humidity from the wall where no sensor is', async () => {
    const wall = await Sensor.create({ name: 'Wall hygrometer', kind: 'wall hygrometer', createdAt: NOW })
    const loft = await buildPlace({ sensorId: wall.id, name: 'Net loft' })
    const tree = await buildTree(foundry, { placeId: loft.id })
    const room = { airTempC: 19.5, relHumidityPct: 66 }
    const { coats } = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: loft.id }], { room }))
    expect(await Coat.findByPk(coats[0]!.coatId)).toMatchObject(room)
  })
})

describe('the air at a dip', () => {
  it('is too dry for a face coat by the limits that the screen warns by', async () => {
    const dry = await Sensor.create({ name: 'Dry corner', kind: 'logger', createdAt: NOW })
    // 9.4 K to the wet bulb: over the 8 K of coats 1 and 2, under the 12 K of later ones. Still air, so that speed says nothing.
    await buildAir(dry.id, NOW - HOUR, NOW + HOUR, { airTempC: 24, relHumidityPct: 35 })
    const corner = await buildPlace({ sensorId: dry.id, airSpeedMps: 0.1 })
    const recipeVersionId = await buildRecipe(foundry, [
      { kind: 'face', stucco: 'fine' },
      { kind: 'face', stucco: 'fine' },
      { kind: 'face', stucco: 'fine' },
    ])
    const tree = await buildTree(foundry, { recipeVersionId, placeId: corner.id })
    const deviations: string[][] = []
    for (const coatNumber of [1, 2, 3]) {
      const { coats } = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber, placeId: corner.id }]))
      deviations.push(coats[0]!.deviations)
    }
    expect(deviations).toEqual([['too dry for face'], ['still wet', 'too dry for face'], ['still wet']])
  })

  it('is not what somebody reads off the wall hours after it', async () => {
    const wall = await Sensor.create({ name: 'Wall of the yard', kind: 'wall hygrometer', createdAt: NOW })
    const yard = await buildPlace({ sensorId: wall.id })
    const tree = await buildTree(foundry, { placeId: yard.id })
    await recordReadings(
      { sensorId: wall.id, source: 'typed', enteredBy: maud.id, rows: [{ measuredAt: NOW, airTempC: 12, relHumidityPct: 80 }] },
      { clock: stoppedClock() },
    )
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 1, placeId: yard.id }], { dippedAt: NOW - 6 * HOUR })
    const { coats } = await log(body)
    expect(await Coat.findByPk(coats[0]!.coatId)).toMatchObject({ airTempC: null, relHumidityPct: null })
  })
})

describe('taking a dip back', () => {
  it('withdraws the coat, lets the one below dry on, and a replay says so', async () => {
    const tree = await buildTree(foundry)
    await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    const at = NOW + 6 * HOUR
    const body = dipBody(foundry, [{ treeId: tree.id, coatNumber: 2 }], { dippedAt: at, bathId: foundry.backupBathId, stucco: 'medium' })
    const { coats } = await log(body, maud, at)
    const undo = { operationId: newId(), coatIds: [coats[0]!.coatId] }
    await undoDips(undo, { member: maud, clock: stoppedClock(at + 9 * MINUTE) })
    const [derived] = (await loadFloor({ now: at + 9 * MINUTE, trees: { ids: [tree.id] } })).trees
    expect(derived).toMatchObject({ state: 'waiting', newest: { number: 1 } })
    expect(await Coat.count({ where: { treeId: tree.id } })).toBe(2)
    expect((await log(body, maud, at)).coats[0]).toMatchObject({ withdrawn: true })
    // The number is free again for the dip that was really made.
    expect((await log({ ...body, operationId: newId() }, maud, at)).coats[0]!.number).toBe(2)
  })

  it('is for the author within ten minutes; later a supervisor gives a reason', async () => {
    const tree = await buildTree(foundry)
    const { coats } = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    const undo = (member: Actor, at: number, reason?: string) =>
      undoDips({ operationId: newId(), coatIds: [coats[0]!.coatId], ...(reason ? { reason } : {}) }, { member, clock: stoppedClock(at) })
    expect((await refusal(undo(wren, NOW + MINUTE))).code).toBe('forbidden')
    expect((await refusal(undo(maud, NOW + 11 * MINUTE))).code).toBe('forbidden')
    expect((await refusal(undo(ines, NOW + 11 * MINUTE))).code).toBe('unprocessable')
    await undo(ines, NOW + 11 * MINUTE, 'Logged on the wrong tree')
    expect(await Coat.findByPk(coats[0]!.coatId)).toMatchObject({ withdrawnReason: 'Logged on the wrong tree' })
    expect((await TreeEvent.findAll({ where: { treeId: tree.id } })).map((event) => event.kind)).toEqual(['coat on', 'coat taken back'])
  })

  it('reaches only the newest coat, and none after the release', async () => {
    const tree = await buildTree(foundry)
    const first = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]))
    const at = NOW + 5 * MINUTE
    const second = await log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 2 }], { dippedAt: at }), maud, at)
    const undo = (coatId: string) => undoDips({ operationId: newId(), coatIds: [coatId] }, { member: maud, clock: stoppedClock(at) })
    expect((await refusal(undo(first.coats[0]!.coatId))).code).toBe('conflict')
    await Tree.update({ releasedAt: at }, { where: { id: tree.id } })
    expect((await refusal(undo(second.coats[0]!.coatId))).code).toBe('conflict')
  })
})

it('two tablets logging one coat fifty times over: one coat each time, one refusal each time', async () => {
  const outcomes: string[] = []
  for (let round = 0; round < 50; round += 1) {
    const tree = await buildTree(foundry)
    const both = await Promise.allSettled([
      log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]), maud),
      log(dipBody(foundry, [{ treeId: tree.id, coatNumber: 1 }]), wren),
    ])
    outcomes.push(
      both
        .map((outcome) => (outcome.status === 'fulfilled' ? 'logged' : (outcome.reason as AppError).code))
        .toSorted()
        .join('+'),
    )
    expect(await Coat.count({ where: { treeId: tree.id } })).toBe(1)
  }
  expect(new Set(outcomes)).toEqual(new Set(['conflict+logged']))
})
