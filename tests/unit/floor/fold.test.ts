import { describe, expect, it } from 'vitest'
import { DIP_NOW_SIZES, floorMode, planFloor, tideCapacity, tideRowHeight } from '@/lib/floor/floor-plan'
import { foldDipNow, type GroupToFold } from '@/lib/floor/fold-dip-now'
import { foldRack } from '@/lib/floor/fold-rack'

const sizes = DIP_NOW_SIZES.wide
const first = { openKey: null, page: 0 }
const group = (key: string, count: number, isStirred = true): GroupToFold => ({ key, count, isStirred })

describe('foldDipNow', () => {
  it('leaves everything open with full rows while it fits', () => {
    const plan = foldDipNow([group('face', 2), group('backup', 3)], 590, sizes, first)
    expect(plan.isDense).toBe(false)
    expect(plan.slots.map((slot) => slot.kind)).toEqual(['open', 'open'])
  })

  it('tries dense rows before it folds anything', () => {
    const groups = [group('face', 2), group('backup', 3)]
    const full = foldDipNow(groups, Number.MAX_SAFE_INTEGER, sizes, first).height
    expect(foldDipNow(groups, full - 1, sizes, first)).toMatchObject({ isDense: true })
  })

  it('opens the first group by whole rows, folds the rest and counts what is left', () => {
    const plan = foldDipNow([group('face', 9), group('medium', 8), group('coarse', 11), group('seal', 3)], 590, sizes, first)
    expect(plan.slots).toEqual([
      { kind: 'open', groupKey: 'face', from: 0, to: 3, page: 0, pages: 3 },
      { kind: 'fold', groupKey: 'medium' },
      { kind: 'fold', groupKey: 'coarse' },
      { kind: 'fold', groupKey: 'seal' },
    ])
  })

  it('turns the pages of the group that somebody opened', () => {
    const groups = [group('face', 9), group('medium', 8), group('coarse', 11), group('seal', 3)]
    const plan = foldDipNow(groups, 590, sizes, { openKey: 'coarse', page: 99 })
    const open = plan.slots.find((slot) => slot.kind === 'open')
    expect(open).toMatchObject({ groupKey: 'coarse', to: 11, page: 3, pages: 4 })
  })

  it('keeps room for the stirring key beside few rows', () => {
    const height = (isStirred: boolean) => foldDipNow([group('backup', 1, isStirred)], 999, sizes, first).height
    expect(height(false) - height(true)).toBe(sizes.keyGap + sizes.stirKey)
  })

  it('never takes more than the height at hand, for any crowd', () => {
    for (let groups = 1; groups <= 12; groups += 1) {
      for (let count = 1; count <= 40; count += 3) {
        for (const height of [420, 520, 590, 760]) {
          const all = Array.from({ length: groups }, (_, index) => group(`g${index}`, count, index % 2 === 0))
          const plan = foldDipNow(all, height, sizes, first)
          expect(plan.height).toBeLessThanOrEqual(height)
          const named = plan.slots.flatMap((slot) => (slot.kind === 'more' ? slot.groupKeys : [slot.groupKey]))
          expect(new Set(named).size).toBe(groups)
        }
      }
    }
  })
})

describe('foldRack', () => {
  it('hangs everything when there are hooks for it', () => {
    const rails = foldRack({ 'last coat on': 2, 'dried out': 1, ready: 4 }, 5)
    expect(rails.map(({ shown, hasMore }) => [shown, hasMore])).toEqual([
      [2, false],
      [1, false],
      [4, false],
    ])
  })

  it('gives every rail a row and counts the rest', () => {
    const rails = foldRack({ 'last coat on': 14, 'dried out': 13, ready: 13 }, 4)
    expect(rails.map(({ shown, hasMore }) => [shown, hasMore])).toEqual([
      [2, true],
      [1, true],
      [1, true],
    ])
  })

  it('takes no row for an empty rail', () => {
    expect(foldRack({ 'last coat on': 0, 'dried out': 3, ready: 0 }, 3).map(({ shown }) => shown)).toEqual([0, 3, 0])
  })
})

describe('planFloor', () => {
  it('is a list on a phone and wherever a board would have to be cut', () => {
    expect(floorMode(390, 844)).toBe('list')
    expect(floorMode(640, 400)).toBe('list')
    expect(floorMode(800, 1280)).toBe('portrait')
    expect(floorMode(1024, 768)).toBe('compact')
    expect(floorMode(1280, 800)).toBe('wide')
    expect(floorMode(1920, 1080)).toBe('wide')
  })

  it('leaves the tide its rows in portrait', () => {
    const plan = planFloor('portrait', 1120, { dipNeed: 2000, hasBareWax: true, hasHeld: true, isSheetOpen: false })
    expect(plan.dipColumn).toBeLessThan(700)
    expect(tideCapacity(plan.tideRows).withPageKey).toBeGreaterThanOrEqual(3)
  })

  it('keeps rows of the tide at 77 px or more, page key included', () => {
    for (let height = 230; height < 900; height += 7) {
      const { all, withPageKey } = tideCapacity(height)
      expect(tideRowHeight(height, all, false)).toBeGreaterThanOrEqual(77)
      expect(tideRowHeight(height, withPageKey, true)).toBeGreaterThanOrEqual(77)
      expect(tideRowHeight(height, all, false) * all).toBeLessThanOrEqual(height)
      expect(tideRowHeight(height, withPageKey, true) * withPageKey + 64).toBeLessThanOrEqual(height)
    }
  })
})
