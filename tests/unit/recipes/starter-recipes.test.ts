import { describe, expect, it } from 'vitest'
import { recipeInput } from '@/lib/recipes/recipe-input'
import { STARTER_RECIPES } from '@/lib/recipes/starter-recipes'

const BATHS = { face: '00000000-0000-4000-8000-00000000000a', backup: '00000000-0000-4000-8000-00000000000b' }

describe('recipes to begin with', () => {
  it.each(STARTER_RECIPES)('$name is a recipe that may be saved', ({ name, coats }) => {
    const typed = { name, note: '', coats: coats.map(({ bathKind, ...coat }) => ({ ...coat, bathId: BATHS[bathKind] })) }
    expect(recipeInput.safeParse(typed).error).toBeUndefined()
  })
  it('go from light to heavy, as their names say', () => {
    expect(STARTER_RECIPES.map(({ coats }) => coats.length)).toEqual([6, 8, 10])
    // Wherever a recipe is chosen, the count stands behind its name.
    for (const { name } of STARTER_RECIPES) expect(name).not.toMatch(/\d|coat/)
  })
  it('put face coats on first, and finer sand before coarser', () => {
    const grades = ['fine', 'medium', 'coarse', 'none']
    for (const { coats } of STARTER_RECIPES) {
      const order = coats.map(({ stucco }) => grades.indexOf(stucco))
      expect(order).toEqual(order.toSorted((a, b) => a - b))
      expect(coats.map(({ kind }) => kind === 'face')).toEqual(coats.map((_, index) => index < 2))
    }
  })
})
