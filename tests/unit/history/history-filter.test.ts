import { describe, expect, it } from 'vitest'
import { historyAddress, historySpan, readHistoryCursor, readHistoryFilter } from '@/lib/history/history-filter'
import { subjectHref } from '@/lib/history/history-line'

const MEMBER = '018f7d1e-7c00-7000-8000-000000000002'
const NONE = { memberId: null, tag: null, kind: null, fromDay: null, toDay: null }

describe('readHistoryFilter', () => {
  it('reads what the form sends, and the address leads back to it', () => {
    const filter = readHistoryFilter({ member: MEMBER, tree: ' t-118 ', kind: 'hold lifted', from: '2026-10-01', to: '2026-10-13' })
    expect(filter).toEqual({ memberId: MEMBER, tag: 'T-118', kind: 'hold lifted', fromDay: '2026-10-01', toDay: '2026-10-13' })
    expect(readHistoryFilter(Object.fromEntries(new URL(historyAddress(filter), 'http://x').searchParams))).toEqual(filter)
  })

  it.each([
    [{}],
    [{ member: '', tree: '', kind: '', from: '', to: '' }],
    [{ member: "1' OR '1'='1", kind: 'k'.repeat(41), from: '2026-02-30', to: 'yesterday' }],
  ])('leaves out what cannot be one: %j', (words) => {
    expect(readHistoryFilter(words)).toEqual(NONE)
  })

  it('keeps what is no tag, so that the page can say that there is no such tree', () => {
    expect(readHistoryFilter({ tree: 'otter' }).tag).toBe('otter')
  })
})

describe('readHistoryCursor', () => {
  it('reads the place where the last page ended', () => {
    expect(readHistoryCursor({ before: '1791882000000.foundry.12' })).toEqual({ at: 1_791_882_000_000, source: 'foundry', id: 12 })
  })
  it.each(['', '1.tree', '1.shed.2', '-1.tree.2', '1.tree.2.3', '1e3.tree.x', ['1.tree.x']])('is null for %j', (before) => {
    expect(readHistoryCursor({ before })).toBeNull()
  })
})

describe('historySpan', () => {
  it.each([
    // Clocks go back on 25 October 2026 and forward on 28 March 2027: days of 25 and 23 hours.
    ['2026-10-25', '2026-10-24T23:00:00Z', '2026-10-26T00:00:00Z'],
    ['2027-03-28', '2027-03-28T00:00:00Z', '2027-03-28T23:00:00Z'],
    ['2026-10-13', '2026-10-12T23:00:00Z', '2026-10-13T23:00:00Z'],
  ])('is the whole local day of %s', (day, from, before) => {
    expect(historySpan({ ...NONE, fromDay: day, toDay: day }, 'Europe/London')).toEqual({
      from: Date.parse(from),
      before: Date.parse(before),
    })
  })
  it('is open where no day is named', () => {
    expect(historySpan(NONE, 'Europe/London')).toEqual({ from: null, before: null })
  })
})

it.each([
  ['recipe', 'a b', '/recipes/a%20b'],
  ['place', 'x', '/settings/places'],
  ['comet', 'x', null],
])('a line about a %s leads to its page', (type, id, href) => {
  expect(subjectHref(type, id)).toBe(href)
})
