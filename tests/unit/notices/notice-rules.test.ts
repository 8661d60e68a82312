import { describe, expect, it } from 'vitest'
import type { NoticeKey, OpenNotice } from '@/lib/notices/notice'
import { isLate, noticeChanges, REOPEN_DWELL_MS, type NoticeRulesInput } from '@/lib/notices/notice-rules'
import type { QueueTree } from '@/lib/queue/contract'
import { buildDryTree, buildQueue, buildQueueRoom, buildQueueTree, NOW, testId } from '@/tests/factories/queue'

const COAT = testId(2, 5)
const TREE = testId(1, 122)

const pass = (trees: QueueTree[], rest: Partial<NoticeRulesInput> = {}) =>
  noticeChanges({ queue: buildQueue({ trees }), open: [], closed: [], now: NOW, ...rest })

const kinds = (changes: { open: NoticeKey[] }) => changes.open.map(({ kind }) => kind)

const opened = (overrides: Partial<OpenNotice> = {}): OpenNotice => ({
  id: 'open',
  kind: 'coat dry',
  subjectType: 'coat',
  subjectId: COAT,
  treeId: TREE,
  ...overrides,
})

const unknownTree = (overrides: Partial<QueueTree> = {}) => buildQueueTree({ state: 'unknown', dry: null, ...overrides })
const allOn = { next: null, coatsOn: 8 }

describe('coat dry', () => {
  it.each(['dip now', 'waiting', 'dried out'] as const)('opens at the guard, in state %s', (state) => {
    const { open } = pass([buildDryTree(5, { state, ...(state === 'dried out' ? allOn : {}) })])
    expect(open[0]).toMatchObject({ kind: 'coat dry', subjectType: 'coat', subjectId: COAT, treeId: TREE, trueSince: NOW - 300_000 })
  })
  it.each(['wet', 'drying', 'nearly dry', 'unknown', 'held', 'overdue', 'bare wax', 'wax ready', 'released', 'scrapped'] as const)(
    'does not open in state %s',
    (state) => expect(kinds(pass([buildDryTree(5, { state })]))).not.toContain('coat dry'),
  )
  it('does not open twice', () => {
    expect(pass([buildDryTree()], { open: [opened()] })).toEqual({ open: [], close: [] })
  })
  it('opens for the next coat after this one was covered, and closes this one', () => {
    const next = { id: testId(2, 6), number: 6, dippedAt: NOW }
    const changes = pass([buildDryTree(1, { newestCoat: next })], { open: [opened()] })
    expect(changes.close).toEqual([{ id: 'open', reason: 'another coat is the newest' }])
    expect(changes.open).toMatchObject([{ kind: 'coat dry', subjectId: next.id }])
  })
  it('closes when the tree is held', () => {
    expect(pass([buildDryTree(5, { state: 'held' })], { open: [opened()] }).close).toEqual([{ id: 'open', reason: 'held' }])
  })
  it.each([[[]], [[buildDryTree(5, { state: 'released' })]], [[buildDryTree(5, { state: 'scrapped' })]]])(
    'closes when the tree left the floor',
    (trees) => expect(pass(trees, { open: [opened()] }).close).toEqual([{ id: 'open', reason: 'the tree left the floor' }]),
  )
  it('stays open while it is overdue', () => {
    expect(pass([buildDryTree(5, { state: 'overdue' })], { open: [opened()] }).close).toEqual([])
  })
  it('is not closed by a room without readings', () => {
    expect(pass([unknownTree()], { open: [opened()] })).toEqual({ open: [], close: [] })
    const warnings = [{ code: 'unknown' as const, level: 'warn' as const, text: 'No readings' }]
    expect(pass([buildQueueTree({ warnings })], { open: [opened()] }).close).toEqual([])
  })
})

describe('late data', () => {
  it.each(['wet', 'drying', 'nearly dry', 'last coat on'] as const)('takes a call back that was told, state %s', (state) => {
    const { open, close } = pass([buildQueueTree({ state })], { open: [opened()] })
    expect(close).toEqual([{ id: 'open', reason: 'withdrawn by late data' }])
    expect(open).toMatchObject([
      { kind: 'call withdrawn', subjectId: COAT, urgency: 'high', audience: { to: 'told by', noticeId: 'open' } },
    ])
  })
  it('takes nothing back while the room is unknown', () => {
    expect(kinds(pass([unknownTree()], { open: [opened()] }))).toEqual([])
  })
  it('ends the taking back when the coat is dry again, and calls it again after the dwell', () => {
    const withdrawn = opened({ id: 'withdrawn', kind: 'call withdrawn' })
    const key = { kind: 'coat dry', subjectType: 'coat', subjectId: COAT } as const
    const early = pass([buildDryTree()], { open: [withdrawn], closed: [{ ...key, closedAt: NOW - REOPEN_DWELL_MS + 1 }] })
    expect(early).toMatchObject({ open: [], close: [{ id: 'withdrawn' }] })
    const later = pass([buildDryTree()], { closed: [{ ...key, closedAt: NOW - REOPEN_DWELL_MS }] })
    expect(kinds(later)).toEqual(['coat dry'])
  })
})

describe('overdue', () => {
  const overdue = buildDryTree(60, { state: 'overdue', stateSince: NOW - 60_000 })
  it('opens once, with high urgency', () => {
    expect(pass([overdue]).open).toMatchObject([{ kind: 'overdue', urgency: 'high', trueSince: NOW - 60_000 }])
    expect(pass([overdue], { open: [opened({ kind: 'overdue' })] })).toEqual({ open: [], close: [] })
  })
  it('closes when the tree is held or no longer overdue, and stays when it is unknown', () => {
    const open = [opened({ kind: 'overdue' })]
    expect(pass([buildDryTree(5, { state: 'held' })], { open }).close).toMatchObject([{ reason: 'held' }])
    expect(pass([buildQueueTree()], { open }).close).toMatchObject([{ reason: 'not overdue any more' }])
    expect(pass([unknownTree()], { open }).close).toEqual([])
  })
})

describe('last coat on and ready for burnout', () => {
  it('tells that the last coat is on at once, and that it dried out later', () => {
    expect(kinds(pass([buildQueueTree({ state: 'last coat on', ...allOn })]))).toEqual(['last coat on'])
    const open = [opened({ kind: 'last coat on' })]
    expect(kinds(pass([buildDryTree(5, { state: 'dried out', ...allOn })], { open }))).toEqual(['coat dry'])
  })
  it('takes the last coat back', () => {
    const below = { id: testId(2, 4), number: 4, dippedAt: NOW - 9e6 }
    expect(pass([buildQueueTree({ newestCoat: below })], { open: [opened({ kind: 'last coat on' })] }).close).toHaveLength(1)
    expect(pass([buildQueueTree()], { open: [opened({ kind: 'last coat on' })] }).close).toEqual([
      { id: 'open', reason: 'another coat is to come' },
    ])
  })
  it('opens ready for burnout per tree and closes it at the release', () => {
    const told = [opened({ kind: 'last coat on' }), opened({ id: 'dry' })]
    const ready = buildDryTree(60, { state: 'ready for burnout', ...allOn })
    expect(pass([ready], { open: told })).toMatchObject({
      open: [{ kind: 'ready for burnout', subjectType: 'tree', subjectId: TREE }],
      close: [],
    })
    const open = [opened({ id: 'ready', kind: 'ready for burnout', subjectType: 'tree', subjectId: TREE })]
    expect(pass([buildDryTree(5, { state: 'released' })], { open }).close).toEqual([{ id: 'ready', reason: 'the tree left the floor' }])
    expect(pass([buildDryTree(5, { state: 'dried out' })], { open }).close).toEqual([{ id: 'ready', reason: 'not ready any more' }])
  })
})

describe('room data stale', () => {
  const stale = buildQueueRoom({ isStale: true })
  const silent = (trees: QueueTree[], rest: Partial<ReturnType<typeof buildQueue>> = {}) => buildQueue({ rooms: [stale], trees, ...rest })
  const open = [opened({ kind: 'room data stale', subjectType: 'sensor', subjectId: '1', treeId: null })]

  it('opens once per sensor that serves a place with open trees', () => {
    const queue = silent([unknownTree(), unknownTree({ id: testId(1, 7) })])
    const changes = noticeChanges({ queue, open: [], closed: [], now: NOW })
    expect(changes.open).toMatchObject([{ kind: 'room data stale', subjectId: '1', audience: { treeIds: [TREE, testId(1, 7)] } }])
    expect(noticeChanges({ queue, open, closed: [], now: NOW })).toEqual({ open: [], close: [] })
  })
  it.each([
    ['no tree hangs there', []],
    ['only bare wax hangs there', [unknownTree({ newestCoat: null, state: 'bare wax' })]],
    ['its trees are released', [unknownTree({ state: 'released' })]],
    ['trees hang elsewhere', [unknownTree({ place: { id: testId(3, 9), name: 'Store' } })]],
  ])('does not open when %s', (_why, trees) => {
    expect(noticeChanges({ queue: silent(trees), open: [], closed: [], now: NOW }).open).toEqual([])
  })
  it('waits for the shift where a person reads the wall hygrometer', () => {
    const shift = { ...buildQueue().shift, isOpen: false }
    const rooms = [buildQueueRoom({ isStale: true, isTypedOnly: true })]
    expect(noticeChanges({ queue: silent([unknownTree()], { rooms, shift }), open: [], closed: [], now: NOW }).open).toEqual([])
    expect(noticeChanges({ queue: silent([unknownTree()], { rooms }), open: [], closed: [], now: NOW }).open).toHaveLength(1)
  })
  it('closes when readings are back, the trees are gone or the sensor is', () => {
    const queues = [buildQueue({ trees: [unknownTree()] }), silent([]), buildQueue({ rooms: [] })]
    expect(queues.map((queue) => noticeChanges({ queue, open, closed: [], now: NOW }).close[0]?.reason)).toEqual([
      'readings are back',
      'no tree waits for it',
      'the sensor was retired',
    ])
  })
})

describe('being late', () => {
  it('is past the time to live, not at it', () => {
    const notice = { trueSince: NOW, ttlSeconds: 7200 }
    expect(isLate(notice, NOW + 7_200_000)).toBe(false)
    expect(isLate(notice, NOW + 7_200_001)).toBe(true)
  })
})
