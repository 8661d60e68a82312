import { beforeAll, describe, expect, it } from 'vitest'
import { changeBath, createBath, retireBath, reuseBath } from '@/lib/commands/save-bath'
import { newId } from '@/lib/core/ids'
import type { Actor } from '@/lib/members/actor'
import { loadBathList } from '@/lib/queries/bath-list'
import { loadQueue } from '@/lib/queries/queue'
import { Bath, Recipe, RecipeVersion } from '@/models'
import { buildRecipe, buildTree, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

import { fieldRefusal, historyOf, kindsOf, openSettings } from '@/tests/factories/settings'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
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
