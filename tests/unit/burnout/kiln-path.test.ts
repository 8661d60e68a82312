import { describe, expect, it } from 'vitest'
import { kilnPath } from '@/lib/burnout/kiln-path'
import type { PourContext } from '@/lib/burnout/pour-verdict'
import { NOW, queueTree, ZONE } from '../../fixtures/queue-tree'

const HOUR = 3_600_000
const CONTEXT: PourContext = {
  now: NOW,
  timeZone: ZONE,
  calendar: { hours: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 })), closures: [] },
}
const drying = (tag: string, likelyHours: number, safeHours: number) =>
  queueTree({ tag, driedOut: { earliestAt: null, likelyAt: NOW + likelyHours * HOUR, safeAt: NOW + safeHours * HOUR } })

describe('kilnPath', () => {
  it('paves whole local days up to the last safe shell, closed ones narrower', () => {
    const { days, width } = kilnPath([drying('T-1', 100, 140)], CONTEXT, 1200)
    expect(days.map((day) => day.day)).toEqual([
      '2026-10-13',
      '2026-10-14',
      '2026-10-15',
      '2026-10-16',
      '2026-10-17',
      '2026-10-18',
      '2026-10-19',
    ])
    expect(days.map((day) => day.isOpen)).toEqual([true, true, true, true, false, false, true])
    expect(days[4]!.width).toBeLessThan(days[1]!.width)
    expect(width).toBeLessThanOrEqual(1200.001)
  })

  it('stands each shell at its safe time, after its likely one', () => {
    const { stands, days } = kilnPath([drying('T-2', 30, 40), drying('T-1', 10, 20)], CONTEXT, 1200)
    expect(stands.map((stand) => stand.trees[0]!.tag)).toEqual(['T-1', 'T-2'])
    for (const stand of stands) expect(stand.likelyX).toBeLessThan(stand.safeX)
    // Thursday 07:10 local lies in the third day.
    expect(stands[1]!.safeX).toBeGreaterThan(days[2]!.x)
  })

  it('stands a run at one spot, with its latest times and its gravest verdict', () => {
    const late = { ...drying('T-2', 10.5, 20.2), pourDate: '2026-10-14', willMissPour: true }
    const { stands } = kilnPath([drying('T-1', 10, 20), late], CONTEXT, 1200)
    expect(stands).toHaveLength(1)
    expect(stands[0]).toMatchObject({ likelyAt: NOW + 10.5 * HOUR, safeAt: NOW + 20.2 * HOUR, verdict: 'will miss' })
  })

  it('never lays one label over another', () => {
    const trees = Array.from({ length: 14 }, (_, index) => drying(`T-${index}`, 5 + index * 4, 10 + index * 4))
    const { stands } = kilnPath(trees, CONTEXT, 1200)
    const labels = stands.flatMap((stand) => (stand.label === null ? [] : [stand.label]))
    expect(labels.length).toBeGreaterThan(5)
    for (const [index, left] of labels.entries()) {
      for (const right of labels.slice(index + 1)) {
        const isApart = left.level !== right.level || left.x + left.width <= right.x || right.x + right.width <= left.x
        expect(isApart).toBe(true)
      }
    }
  })

  it('counts what it does not draw, and leaves out what nobody can foresee', () => {
    const many = Array.from({ length: 20 }, (_, index) => drying(`T-${index}`, 5, 10))
    expect(kilnPath(many, CONTEXT, 1200).moreCount).toBe(6)
    expect(kilnPath([drying('T-1', 400, 500)], CONTEXT, 1200)).toMatchObject({ stands: [], moreCount: 1 })
    expect(kilnPath([queueTree({ driedOut: null })], CONTEXT, 1200)).toMatchObject({ stands: [], moreCount: 0 })
  })

  it('lasts through a clock change', () => {
    const before = { ...CONTEXT, now: Date.parse('2026-10-24T20:00:00Z') }
    const tree = queueTree({ driedOut: { earliestAt: null, likelyAt: before.now + 30 * HOUR, safeAt: before.now + 50 * HOUR } })
    expect(kilnPath([tree], before, 1200).days.map((day) => day.day)).toEqual(['2026-10-24', '2026-10-25', '2026-10-26'])
  })
})
