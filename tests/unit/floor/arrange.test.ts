import { describe, expect, it } from 'vitest'
import { arrangeFloor, countTrees, hasUncalibratedTime, longestWait, runKeyWords } from '@/lib/floor/arrange'
import { afternoonFixture, crowdFixture, FIXTURE_NOW, queueFixture, queueTreeFixture } from '../../factories/queue-fixture'

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

describe('hasUncalibratedTime', () => {
  const tree = (state: 'drying' | 'unknown', isUncalibrated: boolean, likelyIn?: number) =>
    queueTreeFixture({ state, isUncalibrated, ...(likelyIn === undefined ? {} : { likelyIn }) })

  it('is about times that are shown', () => {
    expect(hasUncalibratedTime([tree('drying', false, 60), tree('drying', true, 60)])).toBe(true)
    expect(hasUncalibratedTime([tree('drying', false, 60), tree('drying', true), tree('unknown', true, 60)])).toBe(false)
  })
})

describe('longestWait', () => {
  it('is that of the trees it is asked about', () => {
    const trees = [toDip('T-1', 'overdue', 60), toDip('T-2', 'waiting', 90), toDip('T-3', 'wax ready')]
    expect(longestWait(trees, FIXTURE_NOW)).toBe(90 * 60_000)
    expect(
      longestWait(
        trees.filter((tree) => tree.state === 'overdue'),
        FIXTURE_NOW,
      ),
    ).toBe(60 * 60_000)
    expect(longestWait([], FIXTURE_NOW)).toBeNull()
  })
})

it('names the run key by the number of trees', () => {
  expect([1, 2, 9].map(runKeyWords)).toEqual(['Dip it', 'Dip both', 'Dip all 9'])
})
