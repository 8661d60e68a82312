import { describe, expect, it } from 'vitest'
import { placeRow, tidePage, tideRows } from '@/lib/floor/tide-rows'
import { tideScale } from '@/lib/floor/tide-scale'
import { FIXTURE_NOW, queueTreeFixture, type TreeFixture } from '../../factories/queue-fixture'

const zone = 'Europe/London'
const MINUTE = 60_000
const at = (iso: string) => Date.parse(iso)
const shift = {
  isOpen: true,
  endsAt: at('2026-10-13T16:30:00Z'),
  nextStartsAt: at('2026-10-14T06:30:00Z'),
  nextEndsAt: at('2026-10-14T10:00:00Z'),
}

describe('tideScale', () => {
  const scale = tideScale(FIXTURE_NOW, shift, zone)

  it('gives the rest of the shift half, the night 28 %, the next shift 22 %', () => {
    expect(scale.zones.map(({ label, from, to }) => [label, Math.round(from * 100), Math.round(to * 100)])).toEqual([
      ['This shift', 0, 50],
      ['Night', 50, 78],
      ['Wed', 78, 100],
    ])
  })

  it('is straight inside each part and never runs backwards', () => {
    expect(scale.position(FIXTURE_NOW)).toBe(0)
    expect(scale.position(FIXTURE_NOW - 5 * MINUTE)).toBe(0)
    expect(scale.position((FIXTURE_NOW + shift.endsAt) / 2)).toBeCloseTo(0.25)
    expect(scale.position((shift.endsAt + shift.nextStartsAt) / 2)).toBeCloseTo(0.64)
    expect(scale.position(shift.nextEndsAt)).toBe(1)
    expect(scale.position(shift.nextEndsAt + 999 * MINUTE)).toBe(1)
    let before = -1
    for (let time = FIXTURE_NOW; time < shift.nextEndsAt; time += 10 * MINUTE) {
      expect(scale.position(time)).toBeGreaterThan(before)
      before = scale.position(time)
    }
  })

  it('ticks whole hours that stand apart', () => {
    expect(scale.ticks.map((tick) => tick.label)).toEqual(['16', '17', '21', '00', '03', '09', '10'])
  })

  it('shrinks a shift that is nearly over', () => {
    const late = tideScale(shift.endsAt - 10 * MINUTE, shift, zone)
    expect(late.zones[0]).toMatchObject({ kind: 'shift', to: expect.closeTo(0.15 / 0.65) })
  })

  it('begins with the night outside the shift', () => {
    const now = at('2026-10-13T20:00:00Z')
    const night = tideScale(now, { ...shift, isOpen: false, endsAt: now }, zone)
    expect(night.zones.map((part) => part.kind)).toEqual(['night', 'next'])
    expect(night.zones[0]?.to).toBeCloseTo(0.56)
  })

  it('calls a closed weekend what it is and ticks its days', () => {
    const friday = {
      isOpen: true,
      endsAt: at('2026-10-16T16:30:00Z'),
      nextStartsAt: at('2026-10-19T06:30:00Z'),
      nextEndsAt: at('2026-10-19T15:30:00Z'),
    }
    const weekend = tideScale(at('2026-10-16T13:00:00Z'), friday, zone)
    expect(weekend.zones.map((part) => part.label)).toEqual(['This shift', 'Closed', 'Mon'])
    expect(weekend.ticks.map((tick) => tick.label)).toEqual(expect.arrayContaining(['Sat', 'Sun']))
  })

  it('stands the night in which the clocks go back', () => {
    const autumn = {
      isOpen: true,
      endsAt: at('2026-10-24T16:30:00Z'),
      nextStartsAt: at('2026-10-25T07:30:00Z'),
      nextEndsAt: at('2026-10-25T15:30:00Z'),
    }
    const scaleOfAutumn = tideScale(at('2026-10-24T14:00:00Z'), autumn, zone)
    const positions = scaleOfAutumn.ticks.map((tick) => tick.position)
    expect(positions).toEqual(positions.toSorted((a, b) => a - b))
    expect(positions.every(Number.isFinite)).toBe(true)
  })

  it('has no night where one shift follows the other', () => {
    const midnight = at('2026-10-13T23:00:00Z')
    const round = tideScale(
      FIXTURE_NOW,
      { isOpen: true, endsAt: midnight, nextStartsAt: midnight, nextEndsAt: midnight + 24 * 60 * MINUTE },
      zone,
    )
    expect(round.zones.map((part) => part.kind)).toEqual(['shift', 'next'])
    expect(round.position(round.endsAt)).toBe(1)
  })

  it('stands a foundry that will not open again', () => {
    const none = tideScale(FIXTURE_NOW, { isOpen: false, endsAt: FIXTURE_NOW, nextStartsAt: FIXTURE_NOW, nextEndsAt: FIXTURE_NOW }, zone)
    expect(Number.isFinite(none.position(FIXTURE_NOW + MINUTE))).toBe(true)
  })
})

describe('tideRows', () => {
  const dippedAt = FIXTURE_NOW - 60 * MINUTE
  const inRun = (tag: string, safeIn = 120, overrides: Partial<TreeFixture> = {}) =>
    queueTreeFixture({
      tag,
      state: 'drying',
      likelyIn: 60,
      safeIn,
      newestCoat: { id: '00000000-0000-4000-8000-000000000001', number: 4, dippedAt },
      ...overrides,
    })

  it('makes one row of a run that comes due together', () => {
    const rows = tideRows([inRun('T-1'), queueTreeFixture({ tag: 'T-9', state: 'drying', likelyIn: 60, safeIn: 120 }), inRun('T-2')])
    expect(rows.map((row) => row.trees.map((tree) => tree.tag))).toEqual([['T-1', 'T-2'], ['T-9']])
  })

  it('keeps apart what comes due at different times', () => {
    expect(tideRows([inRun('T-1'), inRun('T-2', 150)])).toHaveLength(2)
  })

  it('keeps apart what does not stand at the same coat of as many', () => {
    const next = inRun('T-1').next
    expect(tideRows([inRun('T-1'), inRun('T-2', 120, { coatsOn: 3, next })])).toHaveLength(2)
    expect(tideRows([inRun('T-1'), inRun('T-2', 120, { coats: inRun('T-2').coats.slice(0, 7) })])).toHaveLength(2)
    expect(tideRows([inRun('T-1'), inRun('T-2', 120, { state: 'nearly dry' })])).toHaveLength(2)
  })

  it('pages what does not fit and counts its trees', () => {
    const rows = tideRows(
      Array.from({ length: 9 }, (_, index) => queueTreeFixture({ state: 'drying', likelyIn: 30 + index, safeIn: 60 + index })),
    )
    expect(tidePage(rows, { all: 9, withPageKey: 8 }, 0)).toMatchObject({ pages: 1, laterTrees: 0 })
    expect(tidePage(rows, { all: 6, withPageKey: 5 }, 0)).toMatchObject({ pages: 2, laterTrees: 4 })
    expect(tidePage(rows, { all: 6, withPageKey: 5 }, 7)).toMatchObject({ page: 1, laterTrees: 0 })
  })
})

describe('placeRow', () => {
  const scale = tideScale(FIXTURE_NOW, shift, zone)
  const place = (likelyIn: number, safeIn: number) => placeRow(queueTreeFixture({ state: 'drying', likelyIn, safeIn }), scale, 490, 230)

  it('sets the label right of the safe edge while that leaves it room', () => {
    expect(place(25, 70).label.side).toBe('right')
  })

  it('sets it inside the water when the water is wide enough', () => {
    expect(place(335, 435).label.side).toBe('inside')
  })

  it('never gives the label less room than its times need', () => {
    for (let likelyIn = 1; likelyIn < 3000; likelyIn += 7) {
      const { label, water } = place(likelyIn, likelyIn * 1.4)
      expect(label.width).toBeGreaterThanOrEqual(230)
      expect(water!.safe).toBeGreaterThanOrEqual(water!.likely)
    }
  })

  it('lets the water run on where a time lies beyond the axis', () => {
    expect(place(2000, 3000).water).toMatchObject({ likely: 1, safe: 1, isLikelyBeyond: true, isSafeBeyond: true })
  })

  it('draws no shore for a tree of which nobody knows', () => {
    expect(placeRow(queueTreeFixture({ state: 'unknown', likelyIn: 10, safeIn: 20 }), scale, 490, 230).water).toBeNull()
  })
})
