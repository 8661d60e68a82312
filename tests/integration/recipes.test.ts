import { beforeAll, describe, expect, it } from 'vitest'
import { addRecipeVersion, createRecipe, renameRecipe, retireRecipe } from '@/lib/commands/save-recipe'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadRecipeDetail } from '@/lib/queries/recipe-detail'
import { loadRecipeList } from '@/lib/queries/recipe-list'
import { loadTreeForm } from '@/lib/queries/tree-form'
import {
  recipeInput,
  recipeVersionInput,
  type RecipeCoatInput,
  type RecipeInput,
  type RecipeVersionInput,
} from '@/lib/recipes/recipe-input'
import { Bath, FoundryEvent, Recipe, RecipeCoat, RecipeVersion } from '@/models'
import { buildFoundry, buildMember, buildTree, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'
import { plansOf } from '@/tests/factories/plans'

let foundry: TestFoundry
let ines: Actor

beforeAll(async () => {
  foundry = await buildFoundry()
  ines = await buildMember('supervisor', 'Ines')
})

const by = () => ({ member: ines, clock: stoppedClock() })
const coat = (overrides: Partial<RecipeCoatInput> = {}): RecipeCoatInput => ({
  kind: 'backup',
  bathId: foundry.backupBathId,
  stucco: 'coarse',
  needReferenceHours: 4,
  moistureTarget: 0.1,
  guard: 'likely',
  drainSeconds: 40,
  longestWaitHours: 72,
  isPrewet: true,
  readAloud: 'Edges twice.',
  ...overrides,
})
const face = () => coat({ kind: 'face', bathId: foundry.faceBathId, stucco: 'fine', guard: 'safe', isPrewet: false })
const seal = () => coat({ kind: 'seal', stucco: 'none', needReferenceHours: 12, moistureTarget: 0.05, guard: 'safe' })
let names = 0
const input = (overrides: Partial<RecipeInput> = {}): RecipeInput =>
  recipeInput.parse({ name: `Small work ${(names += 1)}`, coats: [face(), coat(), seal()], ...overrides })

describe('a new recipe', () => {
  it('has version 1 with its coats in order, not calibrated yet, and a line of history', async () => {
    const { recipeId, versionId } = await createRecipe(input({ name: 'Tall work', note: 'For the long figures.' }), by())
    expect(await RecipeVersion.findByPk(versionId)).toMatchObject({
      recipeId,
      version: 1,
      note: 'For the long figures.',
      calibratedAt: null,
      createdBy: ines.id,
    })
    const coats = await RecipeCoat.findAll({ where: { recipeVersionId: versionId }, order: [['number', 'ASC']] })
    expect(coats.map(({ number, kind, isPrewet }) => [number, kind, isPrewet])).toEqual([
      [1, 'face', false],
      [2, 'backup', true],
      [3, 'seal', true],
    ])
    const [event] = await FoundryEvent.findAll({ where: { subjectType: 'recipe', subjectId: recipeId } })
    expect(event).toMatchObject({ kind: 'recipe added', subjectName: 'Tall work', memberId: ines.id, at: NOW })
    expect(event!.detail).toMatchObject({ after: { coats: [{ number: 1, bath: 'Face slurry' }, { number: 2 }, { number: 3 }] } })
  })

  it('refuses a name that is taken, capitals or not, beside the field', async () => {
    await createRecipe(input({ name: 'Garden work' }), by())
    await expect(createRecipe(input({ name: 'garden WORK' }), by())).rejects.toMatchObject({
      code: 'conflict',
      extra: { fields: [{ path: 'name', message: 'There is a recipe Garden work already.' }] },
    })
  })

  it('refuses a bath that is unknown or retired beside the coat, and leaves nothing behind', async () => {
    const old = await Bath.create({ id: newId(), name: 'Old slurry', kind: 'backup', retiredAt: NOW - 1, createdAt: NOW - 2 })
    for (const [bathId, message] of [
      [newId(), 'There is no such bath.'],
      [old.id, 'Old slurry is retired: choose a bath in use.'],
    ] as const) {
      const name = `Refused ${bathId}`
      await expect(createRecipe(input({ name, coats: [face(), coat({ bathId }), seal()] }), by())).rejects.toMatchObject({
        extra: { fields: [{ path: 'coats.1.bathId', message }] },
      })
      expect(await Recipe.findOne({ where: { name } })).toBeNull()
    }
  })

  it('is demo data only when one of the demo’s own people makes it', async () => {
    const demo = await createRecipe(input(), { member: { ...ines, isDemo: true }, clock: stoppedClock() })
    const own = await createRecipe(input(), by())
    expect((await Recipe.findByPk(demo.recipeId))!.isDemo).toBe(true)
    expect((await Recipe.findByPk(own.recipeId))!.isDemo).toBe(false)
  })
})

const versionInput = (overrides: Partial<RecipeVersionInput> = {}): RecipeVersionInput =>
  recipeVersionInput.parse({
    from: 1,
    follows: 1,
    note: 'Coat 2 was never dry in time.',
    coats: [face(), coat({ needReferenceHours: 4.5 }), seal()],
    ...overrides,
  })
const eventsOf = (recipeId: string) =>
  FoundryEvent.findAll({ where: { subjectType: 'recipe', subjectId: recipeId }, order: [['id', 'ASC']] })
const calibrate = (versionId: string) => RecipeVersion.update({ calibratedAt: NOW }, { where: { id: versionId } })

describe('a further version', () => {
  it('leaves the one before as it was, and writes down both', async () => {
    const { recipeId, versionId } = await createRecipe(input(), by())
    const made = await addRecipeVersion(recipeId, versionInput(), by())
    expect(made).toMatchObject({ version: 2, isCalibrated: false })
    const needs = async (id: string) =>
      (await RecipeCoat.findAll({ where: { recipeVersionId: id }, order: [['number', 'ASC']] })).map((each) => each.needReferenceHours)
    expect(await needs(versionId)).toEqual([4, 4, 12])
    expect(await needs(made.versionId)).toEqual([4, 4.5, 12])
    const event = (await eventsOf(recipeId)).at(-1)!
    expect(event).toMatchObject({ kind: 'recipe version added', memberId: ines.id })
    expect(event.detail).toMatchObject({
      text: expect.stringMatching(/^Version 2 of .*: 1 changed\. Coat 2 was never dry in time\.$/),
      before: { version: 1, coats: [{}, { number: 2, needReferenceHours: 4, bath: 'Backup slurry' }, {}] },
      after: { version: 2, coats: [{}, { number: 2, needReferenceHours: 4.5 }, {}] },
    })
  })

  it('can never be changed or taken away afterwards', async () => {
    const { versionId } = await createRecipe(input(), by())
    const where = { recipeVersionId: versionId, number: 1 }
    const refused = { parent: { message: 'SQLITE_CONSTRAINT: a recipe version never changes' } }
    await expect(RecipeCoat.update({ needReferenceHours: 9 }, { where })).rejects.toMatchObject(refused)
    await expect(RecipeCoat.destroy({ where })).rejects.toMatchObject(refused)
  })

  it('stays calibrated while nothing changes that a need rests on', async () => {
    const { recipeId, versionId } = await createRecipe(input(), by())
    await calibrate(versionId)
    const coats = [face(), coat({ drainSeconds: 55, guard: 'safe', longestWaitHours: 48, readAloud: 'Turn it once.' }), seal()]
    const second = await addRecipeVersion(recipeId, versionInput({ coats }), by())
    expect(second.isCalibrated).toBe(true)
    const third = await addRecipeVersion(recipeId, versionInput({ from: 2, follows: 2 }), by())
    expect(third.isCalibrated).toBe(false)
    // Back to the needs of an old calibrated one.
    const fourth = await addRecipeVersion(recipeId, versionInput({ from: 2, follows: 3, coats }), by())
    expect(fourth.isCalibrated).toBe(true)
    expect((await RecipeVersion.findByPk(fourth.versionId))!.calibratedAt).toBe(NOW)
  })

  it('is refused when it differs in nothing, and when somebody made one meanwhile', async () => {
    const { recipeId } = await createRecipe(input(), by())
    await expect(addRecipeVersion(recipeId, versionInput({ coats: [face(), coat(), seal()] }), by())).rejects.toMatchObject({
      code: 'conflict',
      message: 'Nothing differs from version 1: a new version needs a difference.',
    })
    await addRecipeVersion(recipeId, versionInput(), by())
    await expect(addRecipeVersion(recipeId, versionInput({ note: 'Mine.' }), by())).rejects.toMatchObject({
      code: 'conflict',
      message: expect.stringContaining('Ines made version 2 meanwhile'),
    })
    expect(await RecipeVersion.count({ where: { recipeId } })).toBe(2)
  })

  it('is refused for a version or a recipe that is not there, and for a retired bath', async () => {
    const { recipeId } = await createRecipe(input(), by())
    await expect(addRecipeVersion(newId(), versionInput(), by())).rejects.toMatchObject({ code: 'not_found' })
    await expect(addRecipeVersion(recipeId, versionInput({ from: 7 }), by())).rejects.toMatchObject({ code: 'not_found' })
    const old = await Bath.create({ id: newId(), name: 'Third slurry', kind: 'backup', retiredAt: NOW, createdAt: NOW })
    const coats = [face(), coat({ bathId: old.id }), seal()]
    await expect(addRecipeVersion(recipeId, versionInput({ coats }), by())).rejects.toMatchObject({
      extra: { fields: [{ path: 'coats.1.bathId' }] },
    })
  })
})

describe('a recipe', () => {
  it('of the demo becomes the foundry’s own when somebody changes it, unless it is one of the demo’s people', async () => {
    const asDemo = { member: { ...ines, isDemo: true }, clock: stoppedClock() }
    const { recipeId } = await createRecipe(input({ name: 'Shown' }), asDemo)
    await renameRecipe(recipeId, 'Shown to guests', asDemo)
    expect((await Recipe.findByPk(recipeId))!.isDemo).toBe(true)
    await renameRecipe(recipeId, 'Ours', by())
    expect((await Recipe.findByPk(recipeId))!.isDemo).toBe(false)
  })

  it('takes another name, but not one that is taken', async () => {
    const one = await createRecipe(input({ name: 'Reliefs' }), by())
    const other = await createRecipe(input({ name: 'Busts' }), by())
    await expect(renameRecipe(other.recipeId, 'reliefs', by())).rejects.toMatchObject({ extra: { fields: [{ path: 'name' }] } })
    await renameRecipe(other.recipeId, 'busts', by())
    await renameRecipe(one.recipeId, 'Reliefs', by())
    expect((await Recipe.findByPk(other.recipeId))!.name).toBe('busts')
    expect((await eventsOf(other.recipeId)).at(-1)).toMatchObject({
      kind: 'recipe renamed',
      detail: { before: { name: 'Busts' }, after: { name: 'busts' } },
    })
    expect(await eventsOf(one.recipeId)).toHaveLength(1)
  })

  it('is offered to new trees with its newest version while it is in use', async () => {
    const { recipeId } = await createRecipe(input({ name: 'Offered' }), by())
    const { versionId } = await addRecipeVersion(recipeId, versionInput(), by())
    const offered = async () => (await loadTreeForm()).recipes.filter(({ label }) => label.startsWith('Offered'))
    expect(await offered()).toEqual([{ versionId, label: 'Offered, version 2', coatCount: 3, isCalibrated: false }])
    await retireRecipe(recipeId, true, by())
    expect(await offered()).toEqual([])
    expect((await loadRecipeList()).find(({ id }) => id === recipeId)).toMatchObject({ isRetired: true, version: 2 })
    await retireRecipe(recipeId, true, by())
    await Bath.update({ retiredAt: NOW }, { where: { id: foundry.backupBathId } })
    await expect(retireRecipe(recipeId, false, by())).rejects.toMatchObject({
      code: 'conflict',
      message: 'Backup slurry is retired: take it into use again first.',
    })
    await Bath.update({ retiredAt: null }, { where: { id: foundry.backupBathId } })
    await retireRecipe(recipeId, false, by())
    expect(await offered()).toHaveLength(1)
    expect((await eventsOf(recipeId)).map(({ kind }) => kind)).toEqual([
      'recipe added',
      'recipe version added',
      'recipe retired',
      'recipe taken into use',
    ])
  })

  it('tells each version with its maker, and null for one that is not there', async () => {
    const { recipeId } = await createRecipe(input({ note: 'First.' }), by())
    await addRecipeVersion(recipeId, versionInput(), by())
    const detail = await loadRecipeDetail(recipeId)
    expect(detail!.versions.map(({ version, note, by: maker, coats }) => [version, note, maker, coats.length])).toEqual([
      [2, 'Coat 2 was never dry in time.', 'Ines', 3],
      [1, 'First.', 'Ines', 3],
    ])
    expect(detail!.versions[0]!.coats[0]).toMatchObject({ number: 1, bathName: 'Face slurry', isPrewet: false })
    expect(await loadRecipeDetail(newId())).toBeNull()
  })
})

describe('what stands on a recipe', () => {
  it('is counted: open trees on any version, those that left on theirs', async () => {
    const { recipeId, versionId } = await createRecipe(input(), by())
    const next = await addRecipeVersion(recipeId, versionInput(), by())
    const on = (recipeVersionId: string) => buildTree(foundry, { recipeVersionId })
    const [open, released, scrapped] = [await on(versionId), await on(versionId), await on(versionId)]
    await on(next.versionId)
    await released.update({ releasedAt: NOW })
    await scrapped.update({ releasedAt: NOW - 1, scrappedAt: NOW })
    expect((await loadRecipeList()).find(({ id }) => id === recipeId)).toMatchObject({ openTrees: 2 })
    const [newest, first] = (await loadRecipeDetail(recipeId))!.versions
    expect(newest).toMatchObject({ leftTrees: 0, openTrees: [{ version: 2 }] })
    expect(first).toMatchObject({ leftTrees: 2, openTrees: [{ tag: open.tag }] })
  })

  it('is found by the index of the floor, whatever has left', async () => {
    const { recipeId } = await createRecipe(input(), by())
    const plans = [...(await plansOf(loadRecipeList)), ...(await plansOf(() => loadRecipeDetail(recipeId)))]
    const ofTrees = plans.filter(({ sql }) => sql.includes('FROM trees'))
    expect(ofTrees).toHaveLength(3)
    for (const { plan } of ofTrees) {
      expect(plan).toContain('trees_on_floor')
      expect(plan.replaceAll('COVERING INDEX trees_recipe_version', '')).not.toContain('trees_recipe_version')
    }
  })
})
