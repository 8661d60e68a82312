import { beforeAll, describe, expect, it } from 'vitest'
import { createRecipe } from '@/lib/commands/save-recipe'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { recipeInput, type RecipeCoatInput, type RecipeInput } from '@/lib/recipes/recipe-input'
import { Bath, FoundryEvent, Recipe, RecipeCoat, RecipeVersion } from '@/models'
import { buildFoundry, buildMember, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

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
