import { beforeAll, describe, expect, it } from 'vitest'
import { acceptFactor, acceptRecipeCoats, goBack } from '@/lib/commands/calibrate'
import { logDips } from '@/lib/commands/log-dips'
import { addRecipeVersion } from '@/lib/commands/save-recipe'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadCalibration } from '@/lib/queries/calibration'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadRecipeList } from '@/lib/queries/recipe-list'
import { Calibration, Coat, FormerAir, FoundryEvent, Place, RecipeCoat, RecipeVersion, Tree } from '@/models'
import { buildFinishedCoats } from '@/tests/factories/finished-coats'
import {
  buildAir,
  buildFoundry,
  buildMember,
  buildPlace,
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
let recipeId: string
let firstVersionId: string

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
  firstVersionId = await buildRecipe(foundry)
  // Before any coat: readings that come after a coat was covered are late, and it is not learned from.
  await buildAir(foundry.sensorId, NOW - 30 * HOUR, NOW)
  ;({ recipeId } = await RecipeVersion.findByPk(firstVersionId, { rejectOnEmpty: true }))
})

const by = () => ({ member: ines, clock: stoppedClock() })
const finished = (count: number, coat: Parameters<typeof buildFinishedCoats>[1]) =>
  buildFinishedCoats({ foundry, memberId: ines.id, recipeVersionId: firstVersionId, count }, coat)
const recipeNow = async () => (await loadCalibration(NOW)).recipes.find(({ id }) => id === recipeId)!
const coatNow = async (number: number) => (await recipeNow()).coats.find(({ coat }) => coat.number === number)!
const newestCoats = async () => {
  const newest = await RecipeVersion.findOne({ where: { recipeId }, order: [['version', 'DESC']], rejectOnEmpty: true })
  const coats = await RecipeCoat.findAll({ where: { recipeVersionId: newest.id }, order: [['number', 'ASC']] })
  return { newest, needs: coats.map((coat) => coat.needReferenceHours), counts: coats.map((coat) => coat.calibratedByCoats), coats }
}

describe("a recipe's coat", () => {
  let open: Tree

  it('is proposed once five coats say the same, and nothing changes by itself', async () => {
    open = await buildTree(foundry, { recipeVersionId: firstVersionId })
    await finished(4, { number: 2, theta: 0.2 })
    expect(await coatNow(2)).toMatchObject({ verdict: 'too few', isOpen: false })
    await finished(4, { number: 2, theta: 0.2 })
    await finished(5, { number: 3, theta: 0.01 })
    expect(await coatNow(2)).toMatchObject({ verdict: 'change', isOpen: true })
    expect(await coatNow(3)).toMatchObject({ verdict: 'agrees', isOpen: true, needAfter: 4.16 })
    expect((await newestCoats()).needs).toEqual([2.5, 4, 4.16, 12])
  })

  it('is refused where it is not the one that was seen any more, and then nothing is written', async () => {
    const input = { recipeId, follows: 1, isMovingTrees: false }
    const seen = (await coatNow(2)).needAfter
    await expect(acceptRecipeCoats({ ...input, coats: [{ number: 2, needReferenceHours: seen + 0.1 }] }, by())).rejects.toMatchObject({
      code: 'conflict',
    })
    await expect(acceptRecipeCoats({ ...input, coats: [{ number: 1, needReferenceHours: 2.5 }] }, by())).rejects.toMatchObject({
      code: 'conflict',
    })
    const coats = [{ number: 2, needReferenceHours: seen }]
    await expect(acceptRecipeCoats({ ...input, follows: 2, coats }, by())).rejects.toMatchObject({ code: 'conflict' })
    expect(await RecipeVersion.count({ where: { recipeId } })).toBe(1)
    expect(await Calibration.count()).toBe(0)
  })

  it('is taken over with others as one version, and open trees are moved in the same step', async () => {
    const seen = (await coatNow(2)).needAfter
    const coats = [
      { number: 2, needReferenceHours: seen },
      { number: 3, needReferenceHours: 4.16 },
    ]
    const accepted = await acceptRecipeCoats({ recipeId, follows: 1, coats, isMovingTrees: true }, by())
    // The eight and five trees of the finished coats hang there still, with others than the last coat on.
    expect(accepted).toMatchObject({ version: 2, staying: 0 })
    expect(accepted.moved).toContain(open.tag)
    const { newest, needs, counts, coats: stored } = await newestCoats()
    expect(needs).toEqual([2.5, seen, 4.16, 12])
    expect(counts).toEqual([null, 8, 5, null])
    expect(stored[0]!.needSpread).toBe(0.25)
    expect(stored[1]!.needSpread).toBeGreaterThan(0.15)
    expect(stored[1]!.needSpread).toBeLessThan(0.18)
    expect(newest.calibratedAt).toBeNull()
    expect(newest.note).toBe(`Coat 2: 4 to ${seen} reference hours, by 8 coats. Coat 3: 4.16 reference hours confirmed, by 5 coats.`)
    expect((await Tree.findByPk(open.id))!.recipeVersionId).toBe(newest.id)
    const event = await FoundryEvent.findOne({ where: { kind: 'recipe calibrated' }, rejectOnEmpty: true })
    expect(event).toMatchObject({ subjectId: recipeId, memberId: ines.id })
    expect(event.detail).toMatchObject({
      before: { version: 1, coats: [{ number: 2, needReferenceHours: 4, calibratedByCoats: null }, { number: 3 }] },
      after: { version: 2, coats: [{ number: 2, needReferenceHours: seen, calibratedByCoats: 8 }, { number: 3 }] },
    })
    expect(await coatNow(2)).toMatchObject({ verdict: 'agrees', isOpen: false })
    expect((await loadRecipeList()).find(({ id }) => id === recipeId)?.isCalibrated).toBe(false)
  })

  it('is dipped with its need, its spread and its mark', async () => {
    const tree = await buildTree(foundry, { recipeVersionId: (await newestCoats()).newest.id })
    const dip = (coatNumber: number, at: number, bathId: string) =>
      logDips(
        dipBody(foundry, [{ treeId: tree.id, coatNumber }], {
          bathId,
          stucco: coatNumber === 1 ? 'fine' : 'medium',
          dippedAt: at,
        }),
        { member: ines, clock: stoppedClock(at) },
      )
    await dip(1, NOW - 20 * HOUR, foundry.faceBathId)
    await dip(2, NOW - 2 * HOUR, foundry.backupBathId)
    const [face, backup] = await Coat.findAll({ where: { treeId: tree.id }, order: [['number', 'ASC']] })
    expect(face).toMatchObject({ isCalibrated: false, needSpread: 0.25 })
    expect(backup).toMatchObject({ isCalibrated: true, recipeReferenceHours: (await newestCoats()).needs[1], recessFactor: 1 })
  })

  it('keeps what finished coats say where a person makes a version with another coat changed', async () => {
    const { coats } = await newestCoats()
    const input = coats.map(
      ({ kind, bathId, stucco, needReferenceHours, moistureTarget, guard, drainSeconds, longestWaitHours, isPrewet, readAloud }) => ({
        kind,
        bathId,
        stucco,
        needReferenceHours,
        moistureTarget,
        guard,
        drainSeconds,
        longestWaitHours,
        isPrewet,
        readAloud,
      }),
    )
    const changed = input.with(2, { ...input[2]!, needReferenceHours: 5 })
    await addRecipeVersion(recipeId, { from: 2, follows: 2, note: 'Coat 3 by hand.', coats: changed }, by())
    const { counts, coats: stored } = await newestCoats()
    expect(counts).toEqual([null, 8, null, null])
    expect(stored[2]!.needSpread).toBe(0.25)
  })

  it('can be gone back on while its figure stands, as a further version, once', async () => {
    const rows = await Calibration.findAll({ order: [['coatNumber', 'ASC']] })
    // Coat 3 was changed by hand since.
    await expect(goBack(rows[1]!.id, by())).rejects.toMatchObject({ code: 'conflict' })
    expect(await goBack(rows[0]!.id, by())).toMatch(/^Version 4 of .* has the former need of coat 2\./)
    const { needs, counts, coats } = await newestCoats()
    expect(needs).toEqual([2.5, 4, 5, 12])
    expect(counts).toEqual([null, null, null, null])
    expect(coats[1]!.needSpread).toBe(0.25)
    await expect(goBack(rows[0]!.id, by())).rejects.toMatchObject({ code: 'conflict' })
    expect(await FoundryEvent.count({ where: { kind: 'calibration gone back on' } })).toBe(1)
    // It may be taken over again.
    expect(await coatNow(2)).toMatchObject({ verdict: 'change', isOpen: true })
  })
})

describe("a place's air and a recess", () => {
  it('are taken over from now on, and what has dried keeps its air', async () => {
    const loft = await buildPlace({ sensorId: foundry.sensorId, name: 'Loft', airSpeedMps: 0.5 })
    await finished(8, { number: 2, theta: 0.6, placeId: loft.id })
    const proposal = (await loadCalibration(NOW)).places.find(({ subject }) => subject === loft.id)!
    expect(proposal).toMatchObject({ verdict: 'change', factorBefore: 1 })
    await expect(acceptFactor({ scope: 'place', placeId: loft.id, factor: 0.5 }, by())).rejects.toMatchObject({ code: 'conflict' })
    await acceptFactor({ scope: 'place', placeId: loft.id, factor: proposal.factorAfter }, by())
    expect((await Place.findByPk(loft.id))!.airFactor).toBe(proposal.factorAfter)
    const facts = (await loadFoundry()).places.find(({ id }) => id === loft.id)!
    expect(facts.formerAirs).toMatchObject([{ until: NOW, airFactor: 1, airSpeedFansOnMps: 0.5 }])
    const [row] = await Calibration.findAll({ where: { placeId: loft.id } })
    await goBack(row!.id, by())
    expect((await Place.findByPk(loft.id))!.airFactor).toBe(1)
    expect(await FormerAir.count({ where: { placeId: loft.id } })).toBe(2)
  })

  it('keep the need of coats that are on', async () => {
    await finished(8, { number: 2, theta: 0.9, recessClass: 'deep recess' })
    const proposal = (await loadCalibration(NOW)).recesses.find(({ subject }) => subject === 'deep recess')!
    expect(proposal).toMatchObject({ verdict: 'change', factorBefore: 1.6 })
    const needsBefore = (await Coat.findAll({ order: [['id', 'ASC']] })).map((coat) => coat.needReferenceHours)
    await acceptFactor({ scope: 'recess', recessClass: 'deep recess', factor: proposal.factorAfter }, by())
    expect((await loadFoundry()).recessFactors).toMatchObject({ none: 1, 'deep recess': proposal.factorAfter, 'closed core': 2.5 })
    expect((await Coat.findAll({ order: [['id', 'ASC']] })).map((coat) => coat.needReferenceHours)).toEqual(needsBefore)
    const row = await Calibration.findOne({ where: { scope: 'recess' }, rejectOnEmpty: true })
    await goBack(row.id, by())
    expect((await loadFoundry()).recessFactors['deep recess']).toBe(1.6)
  })
})

describe('what is left out', () => {
  it('is counted by its reason, with the newest of them', async () => {
    const before = (await loadCalibration(NOW)).leftOut
    const countOf = (list: typeof before, reason: string) => list.find((each) => each.reason === reason)?.count ?? 0
    const wall = await buildPlace({ sensorId: (await buildWall()).id, name: 'Shed' })
    await finished(2, { number: 2, theta: null })
    await finished(1, { number: 2, sd: 0.4 })
    await finished(1, { number: 2, gapShare: 0.5 })
    await finished(1, { number: 2, roughMinutes: 30 })
    await finished(1, { number: 2, stucco: 'coarse' })
    await finished(1, { number: 2, deviations: ['other bath'] })
    await finished(1, { number: 2, moistureRatioBelow: 0.3 })
    await finished(1, { number: 2, airChangedAt: NOW })
    await finished(1, { number: 2, placeId: wall.id })
    const after = (await loadCalibration(NOW)).leftOut
    const more = Object.fromEntries(after.map(({ reason, count }) => [reason, count - countOf(before, reason)]))
    expect(more).toEqual({
      'no evidence': 2,
      'air changed': 1,
      gaps: 1,
      'typed only': 1,
      'rough time': 1,
      'other work': 1,
      'recipe changed': 1,
      'wet below': 1,
      weak: 1,
    })
    expect(after.every(({ newest, count }) => newest.length === Math.min(6, count))).toBe(true)
  })

  it('is a coat dipped over before it was dry, from the times alone', async () => {
    const before = await loadCalibration(NOW)
    await finished(1, { number: 2, theta: 0.2, dryAt: null })
    const after = await loadCalibration(NOW)
    expect(after.countedCount).toBe(before.countedCount + 1)
    expect(after.clock.count).toBe(before.clock.count)
    expect(after.earlyCount).toBe(before.earlyCount + 1)
  })

  it('is bounded by two years', async () => {
    const later = await loadCalibration(NOW + 731 * 24 * HOUR)
    expect(later).toMatchObject({ outcomeCount: 0, checked: [], leftOut: [] })
  })
})

const buildWall = async () => {
  const { Sensor } = await import('@/models')
  return Sensor.create({ name: `Wall ${newId().slice(-4)}`, kind: 'wall hygrometer', createdAt: NOW })
}
