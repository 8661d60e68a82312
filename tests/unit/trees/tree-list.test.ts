import { describe, expect, it } from 'vitest'
import { countGroups, dueAt, filterTrees, sortByDue } from '@/lib/trees/tree-list'
import { groupOf, readTreeGroup } from '@/lib/trees/tree-groups'
import { TREE_STATES } from '@/lib/trees/states'
import { NOW, queueTree } from '../../fixtures/queue-tree'

const HOUR = 3_600_000
const tags = (trees: { tag: string }[]) => trees.map((tree) => tree.tag)

describe('sortByDue', () => {
  it('puts what asks for a hand before what dries, and held ones last', () => {
    const trees = [
      queueTree({ tag: 'T-1', state: 'held' }),
      queueTree({ tag: 'T-2', state: 'drying' }),
      queueTree({ tag: 'T-3', state: 'ready for burnout' }),
      queueTree({ tag: 'T-4', state: 'waiting', stateSince: NOW - HOUR }),
      queueTree({ tag: 'T-5', state: 'overdue', stateSince: NOW - HOUR }),
      queueTree({ tag: 'T-6', state: 'dip now' }),
    ]
    expect(tags(sortByDue(trees))).toEqual(['T-5', 'T-6', 'T-4', 'T-2', 'T-3', 'T-1'])
  })

  it('orders drying trees by the time of their own guard', () => {
    const pair = (likelyHours: number, safeHours: number) => ({
      earliestAt: null,
      likelyAt: NOW + likelyHours * HOUR,
      safeAt: NOW + safeHours * HOUR,
    })
    const trees = [
      queueTree({ tag: 'T-1', state: 'drying', guard: 'safe', dry: pair(1, 5) }),
      queueTree({ tag: 'T-2', state: 'wet', guard: 'likely', dry: pair(2, 9) }),
      queueTree({ tag: 'T-3', state: 'last coat on', guard: 'likely', dry: pair(1, 4) }),
      queueTree({ tag: 'T-4', state: 'drying', guard: 'safe', dry: null }),
    ]
    expect(tags(sortByDue(trees))).toEqual(['T-2', 'T-3', 'T-1', 'T-4'])
  })

  it('puts the longest wait first and breaks ties by tag as a number', () => {
    const trees = [
      queueTree({ tag: 'T-10', state: 'waiting', stateSince: NOW - HOUR }),
      queueTree({ tag: 'T-9', state: 'waiting', stateSince: NOW - HOUR }),
      queueTree({ tag: 'T-11', state: 'waiting', stateSince: NOW - 2 * HOUR }),
    ]
    expect(tags(sortByDue(trees))).toEqual(['T-11', 'T-9', 'T-10'])
  })

  it('shows the newest release first', () => {
    const trees = [
      queueTree({ tag: 'T-1', state: 'released', stateSince: NOW - 5 * HOUR }),
      queueTree({ tag: 'T-2', state: 'released', stateSince: NOW - HOUR }),
    ]
    expect(tags(sortByDue(trees))).toEqual(['T-2', 'T-1'])
  })

  it('does not change the list it is given', () => {
    const trees = [queueTree({ tag: 'T-2' }), queueTree({ tag: 'T-1' })]
    sortByDue(trees)
    expect(tags(trees)).toEqual(['T-2', 'T-1'])
  })
})

describe('dueAt', () => {
  it('is infinite where no time is in sight', () => {
    expect(dueAt(queueTree({ dry: null }))).toBe(Number.POSITIVE_INFINITY)
    expect(dueAt(queueTree({ guard: 'safe', dry: { earliestAt: null, likelyAt: NOW, safeAt: null } }))).toBe(Number.POSITIVE_INFINITY)
  })
})

describe('filterTrees', () => {
  const trees = [
    queueTree({ tag: 'T-1', title: 'Otter Gate, panel 2', state: 'drying' }),
    queueTree({ tag: 'T-2', title: 'Kelp Bowl, 2 pieces', state: 'dip now' }),
    queueTree({ tag: 'T-3', title: 'Otter Gate, panel 3', state: 'released' }),
  ]

  it('shows open trees until a group is chosen', () => {
    expect(tags(filterTrees(trees, { query: '', group: null }))).toEqual(['T-1', 'T-2'])
    expect(tags(filterTrees(trees, { query: '', group: 'gone' }))).toEqual(['T-3'])
  })

  it('finds every typed word, in any case and order', () => {
    expect(tags(filterTrees(trees, { query: ' PANEL otter', group: null }))).toEqual(['T-1'])
    expect(tags(filterTrees(trees, { query: 't-2', group: null }))).toEqual(['T-2'])
    expect(filterTrees(trees, { query: 'otter bowl', group: null })).toEqual([])
  })

  it('counts what each group would show for the same words', () => {
    const counts = countGroups(trees, 'otter')
    expect(counts.get(null)).toBe(1)
    expect(counts.has('gone'), 'there is no end of them').toBe(false)
    expect(counts.get('to-dip')).toBe(0)
  })
})

describe('tree groups', () => {
  it('have a home for every state', () => {
    for (const state of TREE_STATES) expect(groupOf(state)).toBeTypeOf('string')
  })
  it('are all open trees when the address bar names none', () => {
    expect(readTreeGroup(undefined)).toBeNull()
    expect(readTreeGroup('constructor')).toBeNull()
    expect(readTreeGroup('held')).toBe('held')
  })
})
