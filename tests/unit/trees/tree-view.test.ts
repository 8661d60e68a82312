import { describe, expect, it } from 'vitest'
import { cutPage, readTreeView, sortTrees, treeViewAddress, viewTrees } from '@/lib/trees/tree-view'
import { NOW, queueTree } from '../../fixtures/queue-tree'

type Overrides = Parameters<typeof queueTree>[0]
const row = (overrides: Overrides, recipeLabel = 'Six coats') => ({ ...queueTree(overrides), recipeLabel })
const tags = (trees: { tag: string }[]) => trees.map((tree) => tree.tag)
const context = { now: NOW, timeZone: 'Europe/London', calendar: { hours: [], closures: [] } }

describe('the view in the address bar', () => {
  it('goes there and back', () => {
    const address = '/trees?q=otter+gate&state=drying&recipe=Six+coats&place=Net+loft&pour=late&sort=pour&order=desc&page=3'
    const view = readTreeView(Object.fromEntries(new URL(address, 'http://x').searchParams))
    expect(treeViewAddress(view, { page: 3 })).toBe(address)
  })

  it('is plain when nothing is asked for, and leads to page 1 with any change', () => {
    expect(treeViewAddress(readTreeView({}))).toBe('/trees')
    expect(treeViewAddress(readTreeView({ page: '4' }), { sort: 'tag' })).toBe('/trees?sort=tag')
  })

  it('leaves out what it does not know', () => {
    const nonsense = { q: ['a', 'b'], state: 'melted', sort: 'colour', order: 'sideways', page: '-1', pour: 'never' }
    expect(readTreeView(nonsense)).toEqual({ ...readTreeView({}), query: 'a' })
    expect(readTreeView({ page: '2.5' }).page).toBe(1)
    expect(readTreeView({ page: '99999999' }).page).toBe(1)
  })
})

describe('sortTrees', () => {
  const trees = [
    row({ tag: 'T-10', title: 'Bell', coatsOn: 3, pourDate: null }),
    row({ tag: 'T-9', title: 'anchor', coatsOn: 7, pourDate: '2026-11-02' }),
    row({ tag: 'T-2', title: 'Bell', coatsOn: 3, pourDate: '2026-10-20' }),
  ]

  it('goes by each column, ties by tag as a number', () => {
    const by = (sort: Parameters<typeof sortTrees>[1]['sort'], isDescending = false) => tags(sortTrees(trees, { sort, isDescending }))
    expect(by('tag')).toEqual(['T-2', 'T-9', 'T-10'])
    expect(by('tag', true)).toEqual(['T-10', 'T-9', 'T-2'])
    expect(by('piece')).toEqual(['T-9', 'T-2', 'T-10'])
    expect(by('coats')).toEqual(['T-2', 'T-10', 'T-9'])
    expect(by('pour')).toEqual(['T-2', 'T-9', 'T-10'])
  })
})

describe('viewTrees', () => {
  const trees = [
    row({ tag: 'T-1', pourDate: null }),
    row({ tag: 'T-2', pourDate: '2026-10-16', willMissPour: false }),
    row({ tag: 'T-3', pourDate: '2026-10-16', willMissPour: true }, 'Heavy shell'),
    row({ tag: 'T-4', pourDate: '2026-12-24', willMissPour: false }),
    row({ tag: 'T-5', pourDate: '2026-09-01', willMissPour: false }),
  ]
  const shown = (words: Record<string, string>) => tags(viewTrees(trees, readTreeView({ sort: 'tag', ...words }), context))

  it('narrows by pour, recipe and place', () => {
    expect(shown({ pour: 'none' })).toEqual(['T-1'])
    expect(shown({ pour: 'week' })).toEqual(['T-2', 'T-3'])
    expect(shown({ pour: 'late' })).toEqual(['T-3', 'T-5'])
    expect(shown({ recipe: 'Heavy shell' })).toEqual(['T-3'])
    expect(shown({ place: 'Nowhere' })).toEqual([])
  })
})

describe('cutPage', () => {
  it('cuts, and gives the last page for one beyond it', () => {
    const rows = Array.from({ length: 101 }, (_, index) => index)
    expect(cutPage(rows, 2, 50)).toEqual({ rows: rows.slice(50, 100), page: 2, pages: 3, total: 101 })
    expect(cutPage(rows, 9, 50)).toEqual({ rows: [100], page: 3, pages: 3, total: 101 })
    expect(cutPage([], 1, 50)).toEqual({ rows: [], page: 1, pages: 1, total: 0 })
  })
})
