import { describe, expect, it } from 'vitest'
import { moveRefusal, type MovingTree } from '@/lib/recipes/move-rules'

const tree = (overrides: Partial<MovingTree> = {}): MovingTree => ({
  tag: 'T-104',
  recipeId: 'eight',
  version: 1,
  coatsOn: 5,
  hasSeal: false,
  isReleased: false,
  isScrapped: false,
  ...overrides,
})
const to = (overrides: Partial<{ recipeId: string; version: number; coatCount: number }> = {}) => ({
  recipeId: 'eight',
  version: 2,
  coatCount: 9,
  ...overrides,
})

describe('a move to a newer version', () => {
  it('is free while something of the version is left to dip', () => {
    expect(moveRefusal(tree(), to())).toBeNull()
    expect(moveRefusal(tree({ coatsOn: 0 }), to({ coatCount: 1 }))).toBeNull()
    expect(moveRefusal(tree({ coatsOn: 8 }), to())).toBeNull()
  })

  it.each([
    ['a version with fewer coats', tree(), to({ coatCount: 4 }), 'T-104 has 5 on, and version 2 has only 4 coats.'],
    ['one whose last coat would be one that is on', tree(), to({ coatCount: 5 }), /nothing of it would be left to dip/],
    ['a tree with its seal on', tree({ hasSeal: true }), to(), /has its seal on/],
    ['another recipe', tree(), to({ recipeId: 'six' }), /another recipe/],
    ['the version it stands on', tree(), to({ version: 1 }), /already/],
    ['an older one', tree({ version: 3 }), to(), /newer version only/],
    ['a released tree', tree({ isReleased: true }), to(), /released/],
    ['a scrapped tree', tree({ isScrapped: true }), to(), /scrapped/],
  ])('is refused to %s', (_, from, target, words) => {
    expect(moveRefusal(from, target)).toMatch(words)
  })
})
