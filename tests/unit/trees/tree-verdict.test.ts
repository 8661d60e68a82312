import { describe, expect, it } from 'vitest'
import { coatCaption, nextDipWords, treeVerdict } from '@/lib/trees/tree-verdict'
import { TREE_STATES } from '@/lib/trees/states'
import { NOW, queueTree } from '../../fixtures/queue-tree'

describe('treeVerdict', () => {
  it('names the coat that dries and the dip that follows', () => {
    expect(treeVerdict(queueTree(), NOW)).toEqual({
      headline: 'Coat 5 of 8 drying',
      pairLead: 'Dry',
      next: 'Then dip 6: Backup slurry, coarse stucco.',
    })
  })

  it('counts how long a dry coat has waited', () => {
    const tree = queueTree({ state: 'waiting', stateSince: NOW - 35 * 60_000 })
    expect(treeVerdict(tree, NOW).headline).toBe('Dry, waiting 35\u00A0min for dip 6 of 8')
  })

  it('never calls an unknown coat dry', () => {
    expect(treeVerdict(queueTree({ state: 'unknown', dry: null }), NOW)).toMatchObject({
      headline: 'Coat 5 of 8: dryness unknown',
      pairLead: null,
    })
  })

  it('counts an extra coat beyond the recipe', () => {
    const base = queueTree()
    const tree = queueTree({ state: 'last coat on', next: null, coatsOn: 9, newestCoat: { ...base.newestCoat!, number: 9 } })
    expect(treeVerdict(tree, NOW).headline).toBe('Last coat on, 9 of 9')
  })

  it('says that a held tree waits for its hold to be lifted', () => {
    expect(treeVerdict(queueTree({ state: 'held' }), NOW).next).toBe('Lift the hold, then dip 6: Backup slurry, coarse stucco.')
  })

  it('has words for every state, with and without coats', () => {
    for (const state of TREE_STATES) {
      for (const tree of [queueTree({ state }), queueTree({ state, coatsOn: 0, newestCoat: null, next: null, dry: null })]) {
        expect(treeVerdict(tree, NOW).headline.length).toBeGreaterThan(3)
      }
    }
  })
})

describe('nextDipWords', () => {
  it('says seal and no stucco on the last coat, and slurry once', () => {
    const next = queueTree().next!
    expect(nextDipWords({ ...next, number: 8, kind: 'seal', stucco: 'none', bathName: 'Backup' })).toBe(
      'dip 8, seal: Backup slurry, no stucco',
    )
  })
})

describe('coatCaption', () => {
  it('tells what is on, open, next and to come', () => {
    expect([4, 5, 6, 7].map((number) => coatCaption(queueTree(), number))).toEqual(['on', 'open', 'next', 'to come'])
    expect(coatCaption(queueTree({ state: 'dip now' }), 5)).toBe('on')
  })
})
