import { describe, expect, it } from 'vitest'
import { NOTICE_KINDS, pushTag } from '@/lib/notices/notice'
import {
  callWithdrawnText,
  coatDryText,
  deviationText,
  lastCoatOnText,
  overdueText,
  readyForBurnoutText,
  roomDataStaleText,
  summaryText,
  testText,
} from '@/lib/notices/notice-text'
import { buildDryTree, buildQueueRoom, buildQueueTree, NOW, testId } from '@/tests/factories/queue'

const MINUTE_MS = 60_000
const context = { now: NOW, timeZone: 'Europe/London' }

describe('the words of a push', () => {
  it('names tree, dip, slurry, place, work and both times, the guard first', () => {
    expect(coatDryText(buildDryTree(10), context)).toEqual({
      title: 'T-122 dry: dip 6',
      body: 'Backup slurry, coarse. Rack B. Otter Gate, panel 2. Safe since 13:50, likely since 13:00.',
    })
  })
  it('says likely where the guard is likely', () => {
    const dry = { earliestAt: null, likelyAt: NOW - MINUTE_MS, safeAt: NOW + 45 * MINUTE_MS }
    expect(coatDryText(buildDryTree(1, { guard: 'likely', dry }), context)).toEqual({
      title: 'T-122 likely dry: dip 6',
      body: 'Backup slurry, coarse. Rack B. Otter Gate, panel 2. Likely since 13:59, safe from 14:45.',
    })
  })
  it('names the day where it is not today', () => {
    expect(coatDryText(buildDryTree(15 * 60), context).body).toContain('Safe since Mon 23:00, likely since Mon 22:10.')
  })
  it('leaves out a time that is beyond the forecast', () => {
    const dry = { earliestAt: null, likelyAt: NOW, safeAt: null }
    expect(coatDryText(buildDryTree(1, { guard: 'likely', dry }), context).body).toMatch(/Otter Gate, panel 2\. Likely since 14:00\.$/)
  })
  it('says so where a person was ahead of the clock', () => {
    expect(coatDryText(buildQueueTree({ state: 'dip now' }), context)).toMatchObject({
      title: 'T-122 felt dry: dip 6',
      body: expect.stringContaining('Safe from 15:50, likely from 15:00.'),
    })
  })
  it('says that the pour date is lost', () => {
    expect(overdueText(buildDryTree(60, { willMissPour: true }), NOW, context).body).toMatch(/Its pour date is lost\.$/)
  })
  it('asks for a look-over when every coat is on', () => {
    expect(coatDryText(buildDryTree(10, { next: null, state: 'dried out' }), context).title).toBe('T-122 dried out: look over')
  })
  it.each([
    ['Europe/London', Date.UTC(2026, 9, 25, 0, 30), '01:30'],
    ['Europe/London', Date.UTC(2026, 9, 25, 1, 30), '01:30'],
    ['Europe/London', Date.UTC(2026, 9, 25, 2, 30), '02:30'],
    ['Europe/London', Date.UTC(2027, 2, 28, 1, 30), '02:30'],
    ['America/New_York', Date.UTC(2027, 2, 14, 7, 30), '03:30'],
    ['Australia/Lord_Howe', Date.UTC(2026, 9, 3, 15, 30), '02:30'],
  ])('speaks local time around a clock change: %s', (timeZone, safeAt, clock) => {
    const tree = buildDryTree(1, { dry: { earliestAt: null, likelyAt: null, safeAt } })
    expect(coatDryText(tree, { now: safeAt + MINUTE_MS, timeZone }).body).toContain(`Safe since ${clock}.`)
  })

  const tree = buildQueueTree({ title: 'W'.repeat(70) })
  const dip = {
    tag: 'T-122',
    title: 'Otter Gate',
    placeName: 'Rack B',
    coatNumber: 6,
    deviations: ['Held', 'Still wet'],
    reason: 'r'.repeat(300),
  }
  const texts = [
    coatDryText(tree, context),
    overdueText(tree, NOW - MINUTE_MS, context),
    lastCoatOnText({ ...tree, next: null, coatsOn: 8 }, context),
    readyForBurnoutText(tree),
    roomDataStaleText(buildQueueRoom(), 3, context),
    callWithdrawnText(tree, context),
    deviationText(dip),
    summaryText(Array.from({ length: 60 }, () => coatDryText(tree, context))),
    testText(),
  ]
  it.each(texts)('is short, calm and whole: $title', (text) => {
    expect(Buffer.byteLength(JSON.stringify(text))).toBeLessThan(900)
    expect(`${text.title}${text.body}`).not.toMatch(/!|please|successfully|undefined|null/i)
    expect(text.body).toMatch(/[.…]$/)
  })
  it('a call that a person has taken back says so, not the air', () => {
    const word = { verdict: 'not yet', kind: 'touch', spot: 'core', by: 'Maud', at: NOW } as const
    expect(callWithdrawnText({ ...tree, word }, context).body).toMatch(/^Maud felt the core: not yet\./)
    expect(callWithdrawnText(tree, context).body).toMatch(/^Late readings show wetter air\./)
  })
  it('has words for every kind', () => expect(texts).toHaveLength(NOTICE_KINDS.length + 1))

  it('tells when readings stopped and how damp it was', () => {
    expect(roomDataStaleText(buildQueueRoom({ measuredAt: NOW - 35 * MINUTE_MS }), 1, context)).toEqual({
      title: 'Shell room logger: no readings',
      body: 'Last reading 13:25, 55 %. 1 tree waits for it. Look at the sensor, or type in a reading.',
    })
  })
})

describe('pushTag', () => {
  it('is one card per tree, in the alphabet of a topic', () => {
    const notice = { kind: 'coat dry', subjectType: 'coat', subjectId: testId(2, 5), treeId: testId(1, 122) }
    expect(pushTag(notice)).toBe(pushTag({ ...notice, kind: 'call withdrawn' }))
    expect(pushTag(notice)).not.toBe(pushTag({ ...notice, kind: 'deviation' }))
    for (const tag of [pushTag(notice), pushTag({ kind: 'room data stale', subjectType: 'sensor', subjectId: '12', treeId: null })]) {
      expect(tag).toMatch(/^[A-Za-z0-9_-]{1,32}$/)
    }
  })
})
