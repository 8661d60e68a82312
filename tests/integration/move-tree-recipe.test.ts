import { beforeAll, describe, expect, it } from 'vitest'
import { logDips } from '@/lib/commands/log-dips'
import { moveTreesToVersion } from '@/lib/commands/move-tree-recipe'
import { scrapTree } from '@/lib/commands/scrap-tree'
import { undoDips } from '@/lib/commands/undo-dips'
import { dipRunAnswer } from '@/lib/coats/dip-contract'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadFloor } from '@/lib/queries/floor'
import { loadNewerVersions } from '@/lib/queries/newer-versions'
import { queueTree } from '@/lib/queue/assemble'
import { Bath, Coat, Recipe, RecipeCoat, RecipeVersion, Tree, TreeEvent } from '@/models'
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

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
  await buildAir(foundry.sensorId, NOW - 2 * HOUR, NOW + 30 * HOUR)
})

const by = () => ({ member: ines, clock: stoppedClock() })

type Changes = Partial<{
  bathId: string
  needReferenceHours: number
  moistureTarget: number
  guard: 'likely' | 'safe'
  longestWaitHours: number
}>

/** The next version of a recipe: the coats of the one before, cut to a length, some of them changed. */
async function nextVersion(
  versionId: string,
  { count, changes = {} }: { count: number; changes?: Record<number, Changes> },
): Promise<string> {
  const before = await RecipeVersion.findByPk(versionId, { rejectOnEmpty: true })
  const id = newId()
  await RecipeVersion.create({ id, recipeId: before.recipeId, version: before.version + 1, createdAt: NOW })
  const coats = await RecipeCoat.findAll({ where: { recipeVersionId: versionId }, order: [['number', 'ASC']] })
  const last = coats.at(-1)!
  for (let number = 1; number <= count; number += 1) {
    const like = number === count ? last : (coats[Math.min(number, coats.length - 1) - 1] ?? last)
    await RecipeCoat.create({ ...like.get({ plain: true }), ...changes[number], recipeVersionId: id, number })
  }
  return id
}

const derive = async (treeId: string, at: number) => (await loadFloor({ now: at, trees: { ids: [treeId] } })).trees[0]!
const dip = (treeId: string, coatNumber: number, at: number) =>
  logDips(dipBody(foundry, [{ treeId, coatNumber, reason: 'In a test.' }], { dippedAt: at }), { member: ines, clock: stoppedClock(at) })

describe('moving a tree to a newer version', () => {
  it('keeps the coats that are on, and takes the new list for those to come', async () => {
    const first = await buildRecipe(foundry)
    const tree = await buildTree(foundry, { recipeVersionId: first })
    await dip(tree.id, 1, NOW)
    const second = await nextVersion(first, { count: 6, changes: { 1: { needReferenceHours: 9 }, 2: { needReferenceHours: 7 } } })
    const moved = await moveTreesToVersion({ versionId: second, treeIds: [tree.id] }, by())
    expect(moved).toEqual({ tags: [tree.tag], version: 2 })

    const { facts, next, plannedDips } = await derive(tree.id, NOW + HOUR)
    expect(facts.recipe.version).toBe(2)
    expect(facts.coats).toMatchObject([{ number: 1, kind: 'face', stucco: 'fine', needReferenceHours: 2.5 }])
    expect(next).toMatchObject({ number: 2, needReferenceHours: 7 })
    expect(plannedDips.map(({ number }) => number)).toEqual([2, 3, 4, 5, 6])

    await dip(tree.id, 2, NOW + 8 * HOUR)
    const coat = await Coat.findOne({ where: { treeId: tree.id, number: 2 }, rejectOnEmpty: true })
    expect(coat.needReferenceHours).toBeCloseTo(7 * (0.9 / 1), 9)

    const [event] = await TreeEvent.findAll({ where: { treeId: tree.id, kind: 'recipe moved' } })
    const { name } = (await Recipe.findByPk((await RecipeVersion.findByPk(second))!.recipeId))!
    expect(event).toMatchObject({
      memberId: ines.id,
      detail: {
        text: `Moved from version 1 to version 2 of ${name}, from coat 2 on.`,
        before: { recipeVersionId: first, version: 1 },
        after: { recipeVersionId: second, version: 2 },
      },
    })
  })

  it('leaves the wet coat its own target, guard and longest wait, so that nothing it was promised moves', async () => {
    const first = await buildRecipe(foundry, [
      { kind: 'backup', stucco: 'medium', need: 4, guard: 'likely', target: 0.1, longestWaitHours: 20 },
      { kind: 'backup', stucco: 'coarse' },
      { kind: 'seal', stucco: 'none', target: 0.05 },
    ])
    const tree = await buildTree(foundry, { recipeVersionId: first })
    await dip(tree.id, 1, NOW)
    const before = await derive(tree.id, NOW + 2 * HOUR)
    const second = await nextVersion(first, {
      count: 5,
      changes: { 1: { needReferenceHours: 40, moistureTarget: 0.4, guard: 'safe', longestWaitHours: 2 } },
    })
    await moveTreesToVersion({ versionId: second, treeIds: [tree.id] }, by())
    const after = await derive(tree.id, NOW + 2 * HOUR)
    expect(after.call).toEqual(before.call)
    expect(after.guard).toBe('likely')
    expect(after.state).toBe(before.state)
    expect(queueTree(after, new Map()).openTarget).toBeCloseTo(0.9, 9)
    // Past the new version's longest wait, well within its own.
    const dry = await derive(tree.id, NOW + 10 * HOUR)
    expect(dry.state).toBe('waiting')
    expect(dry.warnings.map(({ code }) => code)).not.toContain('overdue')
    expect((await derive(tree.id, NOW + 21 * HOUR)).state).toBe('overdue')
  })

  it('gives the coat below its own figures back when the newest is taken back after the move', async () => {
    const first = await buildRecipe(foundry)
    const tree = await buildTree(foundry, { recipeVersionId: first })
    await dip(tree.id, 1, NOW)
    const second = await nextVersion(first, { count: 5, changes: { 1: { longestWaitHours: 2 }, 2: { moistureTarget: 0.3 } } })
    await moveTreesToVersion({ versionId: second, treeIds: [tree.id] }, by())
    const { response } = await dip(tree.id, 2, NOW + 8 * HOUR)
    expect((await derive(tree.id, NOW + 8 * HOUR)).newest).toMatchObject({ number: 2, moistureTarget: 0.3 })
    const coatIds = dipRunAnswer.parse(response).coats.map(({ coatId }) => coatId)
    await undoDips({ operationId: newId(), coatIds }, { member: ines, clock: stoppedClock(NOW + 8 * HOUR) })
    expect((await derive(tree.id, NOW + 8 * HOUR)).newest).toMatchObject({ number: 1, moistureTarget: 0.1, longestWaitHours: 24 })
  })

  it('takes several trees at once: all of them, or none with a sentence for each that cannot', async () => {
    const first = await buildRecipe(foundry)
    const [one, two, three] = [
      await buildTree(foundry, { recipeVersionId: first }),
      await buildTree(foundry, { recipeVersionId: first }),
      await buildTree(foundry, { recipeVersionId: first }),
    ]
    await scrapTree(three.id, 'Cracked.', by())
    const second = await nextVersion(first, { count: 5 })
    await expect(moveTreesToVersion({ versionId: second, treeIds: [one.id, two.id, three.id] }, by())).rejects.toMatchObject({
      code: 'conflict',
      message: `Nothing was moved. ${three.tag} was scrapped.`,
    })
    expect(await Tree.count({ where: { recipeVersionId: second } })).toBe(0)
    const moved = await moveTreesToVersion({ versionId: second, treeIds: [one.id, two.id, one.id] }, by())
    expect(moved.tags.toSorted()).toEqual([one.tag, two.tag].toSorted())
    expect(await TreeEvent.count({ where: { treeId: one.id, kind: 'recipe moved' } })).toBe(1)
  })

  it('is refused with a seal on, with nothing left to dip, backwards, to another recipe, and for what is not there', async () => {
    const first = await buildRecipe(foundry, [
      { kind: 'backup', stucco: 'coarse', need: 0.1 },
      { kind: 'seal', stucco: 'none', need: 0.1, target: 0.05 },
    ])
    const sealed = await buildTree(foundry, { recipeVersionId: first })
    await dip(sealed.id, 1, NOW)
    await dip(sealed.id, 2, NOW + HOUR)
    const second = await nextVersion(first, { count: 3 })
    const move = (versionId: string, treeId: string) => moveTreesToVersion({ versionId, treeIds: [treeId] }, by())
    await expect(move(second, sealed.id)).rejects.toThrow(/has its seal on/)
    expect(await loadNewerVersions(sealed.id)).toMatchObject([{ version: 2, refusal: expect.stringContaining('seal') }])

    const fourOn = await buildRecipe(foundry)
    const tree = await buildTree(foundry, { recipeVersionId: fourOn })
    await dip(tree.id, 1, NOW)
    await dip(tree.id, 2, NOW + HOUR)
    await expect(move(await nextVersion(fourOn, { count: 2 }), tree.id)).rejects.toThrow(/nothing of it would be left to dip/)
    await expect(move(second, tree.id)).rejects.toThrow(/another recipe/)
    await expect(move(fourOn, tree.id)).rejects.toThrow(/already/)
    await expect(move(newId(), tree.id)).rejects.toMatchObject({ code: 'not_found' })
    await expect(move(second, newId())).rejects.toMatchObject({ code: 'not_found' })
    expect((await Tree.findByPk(tree.id))!.recipeVersionId).toBe(fourOn)
  })

  it('is not to a version with a bath that is retired', async () => {
    const first = await buildRecipe(foundry)
    const tree = await buildTree(foundry, { recipeVersionId: first })
    const bath = await Bath.create({ id: newId(), name: 'Old slurry', kind: 'backup', retiredAt: NOW, createdAt: NOW })
    const second = await nextVersion(first, { count: 4, changes: { 2: { bathId: bath.id } } })
    const move = () => moveTreesToVersion({ versionId: second, treeIds: [tree.id] }, by())
    await expect(move()).rejects.toMatchObject({
      code: 'conflict',
      message: 'Nothing was moved. Old slurry is retired: take it into use again first.',
    })
    await bath.update({ retiredAt: null })
    expect((await move()).version).toBe(2)
  })

  it('is not for a tree that was released', async () => {
    const first = await buildRecipe(foundry, [{ kind: 'backup', stucco: 'coarse', need: 0.1, target: 0.05 }])
    const tree = await buildTree(foundry, { recipeVersionId: first })
    await Tree.update({ releasedAt: NOW }, { where: { id: tree.id } })
    const second = await nextVersion(first, { count: 2 })
    await expect(moveTreesToVersion({ versionId: second, treeIds: [tree.id] }, by())).rejects.toThrow(/released to burnout/)
    expect(await loadNewerVersions(tree.id)).toEqual([])
  })
})
