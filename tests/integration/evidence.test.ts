import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { recordEvidence } from '@/lib/commands/record-evidence'
import { undoDips } from '@/lib/commands/undo-dips'
import { withdrawEvidence } from '@/lib/commands/withdraw-evidence'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import type { EvidenceInput } from '@/lib/trees/evidence-input'
import { Coat, Evidence } from '@/models'
import {
  buildAir,
  buildFoundry,
  buildMember,
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
let oona: Actor
let ines: Actor

// One reference hour an hour; a backup coat needs 4 h: likely 4 h after its stucco, safe 5.51 h.
const BACKUPS = [1, 2, 3].map(() => ({ kind: 'backup' as const, stucco: 'medium' as const, need: 4 }))

beforeAll(async () => {
  foundry = await buildFoundry()
  maud = await buildMember('operator', 'Maud')
  oona = await buildMember('operator', 'Oona')
  ines = await buildMember('supervisor', 'Ines')
  await buildAir(foundry.sensorId, NOW - 24 * HOUR, NOW + 30 * HOUR)
})

const by = (member: Actor, now: number) => ({ member, clock: stoppedClock(now) })
const START = NOW + MINUTE

async function dippedTree(recessClass: 'none' | 'closed core' = 'none') {
  const tree = await buildTree(foundry, { recipeVersionId: await buildRecipe(foundry, BACKUPS), recessClass })
  await dip(tree.id, 1, NOW)
  return tree
}
const dip = (treeId: string, coatNumber: number, dippedAt: number) =>
  logDips(dipBody(foundry, [{ treeId, coatNumber }], { dippedAt, bathId: foundry.backupBathId, stucco: 'medium' }), by(maud, dippedAt))

type Taken = EvidenceInput extends infer Input ? (Input extends EvidenceInput ? Omit<Input, 'operationId' | 'coatNumber'> : never) : never

const take = async (treeId: string, taken: Taken, at: number, member = maud, coatNumber = 1) =>
  (await recordEvidence(treeId, { operationId: newId(), coatNumber, ...taken }, by(member, at))).response
const touch = (verdict: 'dry' | 'not yet', spot: 'outside' | 'recess' | 'core' = 'outside') => ({ kind: 'touch' as const, spot, verdict })
const weigh = (massKg: number, moment: 'before dip' | 'after stucco' | 'now' = 'now') => ({ kind: 'weighing' as const, moment, massKg })

const seen = async (treeId: string, now: number) => {
  const [tree] = (await loadFloor({ now, trees: { ids: [treeId] } })).trees
  return { state: tree!.state, mayDip: tree!.mayDip, call: tree!.call!, belief: tree!.belief! }
}
const hoursAfterStucco = (at: number | null) => (at! - START) / HOUR

describe('a touch', () => {
  it("moves the need as the published closed form of a one-sided observation says: 'not yet' at 4.6 of 4 gives 5.09 and 6.34", async () => {
    const tree = await dippedTree()
    await take(tree.id, touch('not yet'), START + 4.6 * HOUR)
    const { call } = await seen(tree.id, START + 4.7 * HOUR)
    // Mills ratio of the normal distribution: mean +0.2414, sd 0.1704.
    expect(hoursAfterStucco(call.likelyAt)).toBeCloseTo(5.092, 2)
    expect(hoursAfterStucco(call.safeAt)).toBeCloseTo(6.335, 2)
  })

  it('does not depend on the order in which it was told, nor on when', async () => {
    const [one, other] = [await dippedTree(), await dippedTree()]
    await take(one.id, touch('not yet'), START + 3.5 * HOUR)
    await take(one.id, touch('dry'), START + 4.6 * HOUR)
    await take(other.id, touch('dry'), START + 4.6 * HOUR)
    await take(other.id, { ...touch('not yet'), takenAt: START + 3.5 * HOUR }, START + 5 * HOUR, oona)
    const [first, second] = [await seen(one.id, START + 6 * HOUR), await seen(other.id, START + 6 * HOUR)]
    expect(second.call.likelyAt).toBe(first.call.likelyAt)
    expect(second.call.safeAt).toBe(first.call.safeAt)
    expect(hoursAfterStucco(first.call.likelyAt)).toBeCloseTo(4.009, 2)
    expect(hoursAfterStucco(first.call.safeAt)).toBeCloseTo(4.795, 2)
  })

  it('frees a tree at once where it was taken at the spot that dries last, and nowhere else', async () => {
    const tree = await dippedTree('closed core')
    await take(tree.id, touch('dry', 'outside'), START + 6 * HOUR)
    const outside = await seen(tree.id, START + 6 * HOUR)
    expect(outside.mayDip).toBe(false)
    // The outside was due to be dry by then: hardly any news of a core that needs two and a half times as much.
    expect(Math.abs(hoursAfterStucco(outside.call.likelyAt) - 10)).toBeLessThan(0.4)
    await take(tree.id, touch('dry', 'core'), START + 7 * HOUR)
    expect((await seen(tree.id, START + 7 * HOUR)).mayDip).toBe(true)
  })

  it('is refused at a spot that the tree does not have, before the dip, ahead of the clock, and on a coat that is covered by now', async () => {
    const tree = await dippedTree()
    const refusal = (taken: Taken, coatNumber = 1) => take(tree.id, taken, START + HOUR, maud, coatNumber).catch((error: unknown) => error)
    expect(await refusal(touch('dry', 'core'))).toMatchObject({ code: 'unprocessable', extra: { fields: [{ path: 'spot' }] } })
    expect(await refusal({ ...touch('dry'), takenAt: NOW - HOUR })).toMatchObject({
      code: 'unprocessable',
      extra: { fields: [{ path: 'takenAt' }] },
    })
    expect(await refusal({ ...touch('dry'), takenAt: START + 2 * HOUR })).toMatchObject({ code: 'unprocessable' })
    await dip(tree.id, 2, START + 0.5 * HOUR)
    expect(await refusal(touch('dry'))).toMatchObject({ code: 'conflict', message: `${tree.tag} has coat 2 on by now: nothing was kept.` })
    expect(await Evidence.count({ where: { treeId: tree.id } })).toBe(0)
  })
})

describe('one judgement', () => {
  it('is one, however often it is said: three touches free nothing that one does not', async () => {
    const [once, thrice] = [await dippedTree(), await dippedTree()]
    await take(once.id, touch('dry'), START + 2.4 * HOUR)
    for (const minutes of [0, 1, 2]) await take(thrice.id, touch('dry'), START + 2.4 * HOUR + minutes * MINUTE, minutes === 1 ? oona : maud)
    const [first, second] = [await seen(once.id, START + 3 * HOUR), await seen(thrice.id, START + 3 * HOUR)]
    expect(second.call.safeAt).toBe(first.call.safeAt)
    expect(second.belief.heard.filter(({ unheard }) => unheard !== null)).toHaveLength(2)
  })

  it("'dry' on the last coat stands beside the clock: it neither moves the likely time nor dries the shell out before it", async () => {
    const recipeVersionId = await buildRecipe(foundry, BACKUPS.slice(0, 1))
    const tree = await buildTree(foundry, { recipeVersionId })
    await dip(tree.id, 1, NOW)
    const before = (await seen(tree.id, START + 3 * HOUR)).call
    await take(tree.id, touch('dry'), START + 2.4 * HOUR)
    await take(tree.id, { ...touch('dry'), kind: 'colour' }, START + 2.5 * HOUR)
    const after = await seen(tree.id, START + 3 * HOUR)
    expect(after.call.likelyAt).toBe(before.likelyAt)
    expect(after.state).toBe('last coat on')
    // Likely dry by the clock, and somebody has felt it.
    expect((await seen(tree.id, START + 4.1 * HOUR)).state).toBe('dried out')
  })

  it('of an outside teaches nothing of a core', async () => {
    const tree = await dippedTree('closed core')
    await take(tree.id, touch('not yet', 'outside'), START + 3 * HOUR)
    await take(tree.id, touch('dry', 'outside'), START + 5 * HOUR)
    await dip(tree.id, 2, START + 14 * HOUR)
    const coat = await Coat.findOne({ where: { treeId: tree.id, number: 1 }, rejectOnEmpty: true })
    expect(coat.outcomeTheta).toBeNull()
  })

  it('of a coat that was logged late is that coat’s, not of the one below', async () => {
    const tree = await dippedTree()
    // Coat 2 is dipped at 6 h and told at 6.7 h; in between somebody weighs it while the tablet still says coat 1.
    await take(tree.id, weigh(12.4, 'after stucco'), START + 6.2 * HOUR)
    const run = dipBody(foundry, [{ treeId: tree.id, coatNumber: 2 }], {
      dippedAt: START + 6 * HOUR,
      bathId: foundry.backupBathId,
      stucco: 'medium',
    })
    await logDips(run, by(maud, START + 6.7 * HOUR))
    const second = await Coat.findOne({ where: { treeId: tree.id, number: 2 }, rejectOnEmpty: true })
    expect(await Evidence.count({ where: { coatId: second.id, moment: 'after stucco' } })).toBe(1)
    // Taken back and logged again it keeps its weight.
    await undoDips({ operationId: newId(), coatIds: [second.id] }, by(maud, START + 6.8 * HOUR))
    await logDips({ ...run, operationId: newId() }, by(maud, START + 6.9 * HOUR))
    const again = await Coat.findOne({ where: { treeId: tree.id, number: 2, withdrawnAt: null }, rejectOnEmpty: true })
    expect(await Evidence.count({ where: { coatId: again.id, moment: 'after stucco' } })).toBe(1)
  })
})

describe('a weighing', () => {
  it('moves the time once the coat was weighed before its dip and after its stucco; before that it says why not', async () => {
    const tree = await buildTree(foundry, { recipeVersionId: await buildRecipe(foundry, BACKUPS) })
    await take(tree.id, weigh(10, 'before dip'), NOW - MINUTE, maud, 0)
    await dip(tree.id, 1, NOW)
    expect(await take(tree.id, weigh(11.9), START + HOUR)).toMatchObject({ unheard: 'Nobody weighed it after its stucco.' })
    expect(await take(tree.id, { ...weigh(12, 'after stucco'), takenAt: START }, START + HOUR)).toMatchObject({
      unheard: 'It tells what the coat weighs, not how dry it is.',
    })
    // 2 kg added, 15 % of it water by the starting value: 0.3 kg. After 2 h of 4 half is left by weight, 34 % by the clock.
    await take(tree.id, weigh(11.85), START + 2 * HOUR)
    const { call, belief } = await seen(tree.id, START + 2 * HOUR)
    expect(belief.water).toEqual({ waterKg: expect.closeTo(0.3, 6), error: 0.2 })
    expect(belief.weighed.at(-1)?.moistureRatio).toBeCloseTo(0.5, 6)
    expect(hoursAfterStucco(call.likelyAt)).toBeGreaterThan(4.3)
  })

  it('three of one coat whose water is known fit Page, and the next dip settles what the coat says of the clock', async () => {
    const tree = await buildTree(foundry, { recipeVersionId: await buildRecipe(foundry, BACKUPS) })
    await take(tree.id, weigh(4, 'before dip'), NOW - MINUTE, maud, 0)
    await dip(tree.id, 1, NOW)
    // A coat with 0.3 kg of water that really needs 4.8: MR = 0.1^((D / 4.8)^1.1).
    const mass = (dose: number) => 6 - 0.3 * (1 - 0.1 ** ((dose / 4.8) ** 1.1))
    await take(tree.id, { ...weigh(6, 'after stucco'), takenAt: START }, START)
    for (const dose of [0.5, 1.5, 2.5, 3.5, 5, 6.2, 9, 11]) await take(tree.id, weigh(mass(dose)), START + dose * HOUR)
    const dry = await seen(tree.id, START + 11 * HOUR)
    // It has stopped losing water, so its own dry mass is known.
    expect(dry.belief.water?.error).toBe(0.05)
    expect(dry.belief.pageExponent).toBeGreaterThan(1)
    expect(dry.belief.pageExponent).toBeLessThan(1.25)
    expect(dry.call.need.likely).toBeGreaterThan(4.5)
    expect(dry.call.need.likely).toBeLessThan(5)

    await dip(tree.id, 2, START + 11.5 * HOUR)
    const coat = await Coat.findOne({ where: { treeId: tree.id, number: 1 }, rejectOnEmpty: true })
    expect(Math.abs(coat.outcomeTheta! - Math.log(4.8 / 4))).toBeLessThan(0.08)
    expect(Math.abs(coat.outcomeDryAt! - (START + 4.8 * HOUR))).toBeLessThan(25 * MINUTE)
    expect(coat.outcomeGapShare).toBe(0)
    expect(await Evidence.count({ where: { coatId: coat.id, doseReferenceHours: null } })).toBe(0)

    // The tree's next coat begins where this one left off.
    const next = await seen(tree.id, START + 12 * HOUR)
    expect(next.belief.prior.mean).toBeGreaterThan(0.08)
    expect(next.belief.prior.sd).toBeLessThan(0.25)

    const second = await Coat.findOne({ where: { treeId: tree.id, number: 2 }, rejectOnEmpty: true })
    await undoDips({ operationId: newId(), coatIds: [second.id] }, by(maud, START + 11.6 * HOUR))
    expect(await coat.reload()).toMatchObject({ outcomeTheta: null, outcomeSd: null, outcomeDryAt: null, coveredAt: null })
  })
})

describe('a surface temperature', () => {
  it('as cold as a wet coat puts the time off, back at the room it brings it forward; in damp air it says nothing', async () => {
    const [cold, warm] = [await dippedTree(), await dippedTree()]
    // 21 °C and 50 %: a wet coat sits at 14.6 °C.
    const surface = (surfaceTempC: number) => ({ kind: 'surface temperature' as const, spot: 'outside' as const, surfaceTempC })
    await take(cold.id, surface(14.8), START + 3 * HOUR)
    await take(warm.id, surface(20.8), START + 3 * HOUR)
    expect(hoursAfterStucco((await seen(cold.id, START + 3 * HOUR)).call.likelyAt)).toBeGreaterThan(4.1)
    expect(hoursAfterStucco((await seen(warm.id, START + 3 * HOUR)).call.likelyAt)).toBeLessThan(3.2)
    const damp = await dippedTree()
    const answer = await take(damp.id, { ...surface(18), room: { airTempC: 20, relHumidityPct: 85 } }, START + 3 * HOUR)
    expect(answer).toMatchObject({ unheard: 'The air is too damp for it: a wet coat would cool by less than 3 K.' })
  })
})

describe('wrong evidence', () => {
  it('is withdrawn, not deleted, and leaves the times as they were', async () => {
    const tree = await dippedTree()
    const before = (await seen(tree.id, START + 5 * HOUR)).call
    const { evidenceId } = await take(tree.id, touch('not yet'), START + 5 * HOUR)
    expect((await seen(tree.id, START + 5 * HOUR)).call.likelyAt).toBeGreaterThan(before.likelyAt!)
    const id = String(evidenceId)
    await expect(withdrawEvidence(id, { operationId: newId() }, by(oona, START + 5.1 * HOUR))).rejects.toMatchObject({ code: 'forbidden' })
    await expect(withdrawEvidence(id, { operationId: newId() }, by(ines, START + 5.1 * HOUR))).rejects.toMatchObject({
      code: 'unprocessable',
    })
    await withdrawEvidence(id, { operationId: newId() }, by(maud, START + 5.1 * HOUR))
    expect((await seen(tree.id, START + 5 * HOUR)).call).toEqual(before)
    expect(await Evidence.findByPk(id)).toMatchObject({ withdrawnBy: maud.id })
    await expect(withdrawEvidence(id, { operationId: newId() }, by(maud, START + 5.1 * HOUR))).rejects.toMatchObject({ code: 'conflict' })
  })

  it('on a covered coat is taken out of what the coat says of the clock', async () => {
    const tree = await dippedTree()
    await take(tree.id, touch('not yet'), START + 5 * HOUR)
    const { evidenceId } = await take(tree.id, touch('dry'), START + 6 * HOUR)
    await dip(tree.id, 2, START + 6 * HOUR)
    const coat = await Coat.findOne({ where: { treeId: tree.id, number: 1 }, rejectOnEmpty: true })
    const told = coat.outcomeTheta!
    await withdrawEvidence(String(evidenceId), { operationId: newId(), reason: 'Another tree' }, by(ines, START + 9 * HOUR))
    expect((await coat.reload()).outcomeTheta).toBeGreaterThan(told + 0.05)
  })
})

describe('one operation', () => {
  it('is kept once, however often it is sent', async () => {
    const tree = await dippedTree()
    const input = { operationId: newId(), coatNumber: 1, ...touch('dry') }
    const answers = [
      await recordEvidence(tree.id, input, by(maud, START + 4 * HOUR)),
      await recordEvidence(tree.id, input, by(maud, START + 4 * HOUR)),
    ]
    expect(answers[1]?.response).toEqual(answers[0]?.response)
    expect(await Evidence.count({ where: { treeId: tree.id } })).toBe(1)
  })
})
