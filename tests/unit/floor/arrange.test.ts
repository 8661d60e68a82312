import { describe, expect, it } from 'vitest'
import { arrangeFloor, countTrees, runKeyWords } from '@/lib/floor/arrange'
import { afternoonFixture, crowdFixture, queueFixture, queueTreeFixture } from '../../factories/queue-fixture'

const toDip = (tag: string, state: 'overdue' | 'waiting' | 'wax ready', since?: number) =>
  queueTreeFixture({ tag, state, coatsOn: 0, ...(since === undefined ? {} : { since }) })

const tags = (trees: { tag: string }[]) => trees.map((tree) => tree.tag)

describe('arrangeFloor', () => {
  it('groups what is to dip by bath and stucco, face coats first', () => {
    const board = arrangeFloor(afternoonFixture())
    expect(board.dipNow.map((group) => `${group.bathName}, ${group.stucco}`)).toEqual(['Face slurry, fine', 'Backup slurry, coarse'])
    expect(board.dipNow.map((group) => tags(group.trees))).toEqual([
      ['T-124', 'T-126'],
      ['T-118', 'T-120', 'T-121'],
    ])
    expect(board.dipNow.map((group) => group.isStirred)).toEqual([true, false])
  })

  it('puts the overdue first, then who has waited longest, wax ready last', () => {
    const { dipNow } = arrangeFloor(
      queueFixture({
        trees: [toDip('T-1', 'wax ready'), toDip('T-2', 'waiting', 10), toDip('T-3', 'waiting', 90), toDip('T-4', 'overdue', 5)],
      }),
    )
    expect(tags(dipNow[0]!.trees)).toEqual(['T-4', 'T-3', 'T-2', 'T-1'])
  })

  it('orders what dries by the time its guard counts, the unknown last', () => {
    const { drying } = arrangeFloor(
      queueFixture({
        trees: [
          queueTreeFixture({ tag: 'T-1', state: 'unknown', likelyIn: 5, safeIn: 6 }),
          queueTreeFixture({ tag: 'T-2', state: 'drying', guard: 'safe', likelyIn: 10, safeIn: 90 }),
          queueTreeFixture({ tag: 'T-3', state: 'drying', guard: 'likely', likelyIn: 60, safeIn: 120 }),
        ],
      }),
    )
    expect(tags(drying)).toEqual(['T-3', 'T-2', 'T-1'])
  })

  it('loses no tree that is on the floor', () => {
    const queue = crowdFixture(200)
    const board = arrangeFloor(queue)
    const shown =
      [board.drying, board.lastCoatOn, board.driedOut, board.ready, board.held, board.bareWax].flat().length + countTrees(board.dipNow)
    expect(shown).toBe(queue.trees.length)
  })

  it('keeps a tree to dip whose recipe names no next coat', () => {
    const board = arrangeFloor(queueFixture({ trees: [queueTreeFixture({ state: 'waiting', next: null })] }))
    expect(board.drying).toHaveLength(1)
  })
})

it('names the run key by the number of trees', () => {
  expect([1, 2, 9].map(runKeyWords)).toEqual(['Dip it', 'Dip both', 'Dip all 9'])
})
