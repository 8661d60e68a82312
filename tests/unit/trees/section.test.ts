import { describe, expect, it } from 'vitest'
import type { CoatKind, Stucco } from '@/lib/coats/vocabulary'
import { bandGrade, describeSection, sectionOf } from '@/lib/trees/section'
import { TREE_STATES } from '@/lib/trees/states'

const RECIPE: { kind: CoatKind; stucco: Stucco }[] = [
  { kind: 'face', stucco: 'fine' },
  { kind: 'backup', stucco: 'medium' },
  { kind: 'core fill', stucco: 'coarse' },
  { kind: 'seal', stucco: 'none' },
]
const tree = { coatsOn: 2, coats: RECIPE, openDry: 0.6, openTarget: 0.9 }

describe('sectionOf', () => {
  it('draws each stucco as its band, a coat without stucco as seal', () => {
    expect(RECIPE.map(bandGrade)).toEqual(['fine', 'medium', 'coarse', 'seal'])
    expect(bandGrade({ kind: 'backup', stucco: 'none' })).toBe('seal')
  })

  it('keeps the newest coat open while it dries', () => {
    expect(sectionOf({ ...tree, state: 'drying' })).toMatchObject({ done: 1, open: { dry: 0.6 }, state: 'drying' })
    expect(sectionOf({ ...tree, state: 'waiting' })).toMatchObject({ done: 2, open: null, state: 'waiting' })
  })

  it('never shows an unknown coat as dry', () => {
    expect(sectionOf({ ...tree, state: 'unknown', openDry: null })).toMatchObject({ done: 1, open: { dry: 0 }, state: 'unknown' })
  })

  it('draws an extra coat beyond the recipe', () => {
    expect(sectionOf({ ...tree, coatsOn: 6, state: 'waiting', openDry: null }).coats).toHaveLength(6)
  })
})

describe('describeSection', () => {
  it('says how far the tree is and what comes next', () => {
    expect(describeSection(sectionOf({ ...tree, state: 'drying' }))).toBe('Coat 2 of 4, medium: 60 % dry, dip at 90 %.')
    expect(describeSection(sectionOf({ ...tree, state: 'overdue', openDry: null }))).toBe(
      '2 on and dry, overdue. Next: dip 3 of 4, coarse.',
    )
    expect(describeSection(sectionOf({ ...tree, coatsOn: 4, state: 'last coat on', openTarget: 0.95 }))).toBe(
      'Last coat on, 4 of 4: 60 % dry, dried out at 95 %.',
    )
    expect(describeSection(sectionOf({ ...tree, state: 'unknown' }))).toBe('Coat 2 of 4, medium: how dry is not known.')
  })

  it('has a sentence for every state', () => {
    for (const state of TREE_STATES) expect(describeSection(sectionOf({ ...tree, state }))).toMatch(/\.$/)
  })
})
