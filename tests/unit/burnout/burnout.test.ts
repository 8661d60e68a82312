import { describe, expect, it } from 'vitest'
import { burnoutHeadline, groupForBurnout, inTheWay } from '@/lib/burnout/burnout-groups'
import { pourSentence, pourVerdict, type PourContext } from '@/lib/burnout/pour-verdict'
import { blockingChecks, needsConfirmation, releaseKey } from '@/lib/burnout/release-key'
import type { ReleaseCheck } from '@/lib/trees/detail-contract'
import { NOW, queueTree, ZONE } from '../../fixtures/queue-tree'

/** Open at seven on weekdays: a pour on Friday 16 needs its shell by 07:00 local, 06:00 UTC. */
const CONTEXT: PourContext = {
  now: NOW,
  timeZone: ZONE,
  calendar: { hours: [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: 420, closesMinute: 1020 })), closures: [] },
}
const at = (text: string) => Date.parse(text)
const driedOut = (likely: string, safe: string | null) => ({
  earliestAt: null,
  likelyAt: at(likely),
  safeAt: safe === null ? null : at(safe),
})

describe('pourVerdict', () => {
  const tree = (likely: string, safe: string | null) => queueTree({ pourDate: '2026-10-16', driedOut: driedOut(likely, safe) })
  it.each([
    ['holds', '2026-10-14T10:00Z', '2026-10-16T06:00Z'],
    ['tight', '2026-10-15T10:00Z', '2026-10-16T06:01Z'],
    ['tight', '2026-10-15T10:00Z', null],
    ['will miss', '2026-10-16T06:01Z', '2026-10-16T10:00Z'],
  ] as const)('%s when likely %s and safe %s', (verdict, likely, safe) => {
    expect(pourVerdict(tree(likely, safe), CONTEXT)).toBe(verdict)
  })
  it('follows the server where it says that the pour is lost', () => {
    expect(pourVerdict({ ...tree('2026-10-14T10:00Z', '2026-10-14T12:00Z'), willMissPour: true }, CONTEXT)).toBe('will miss')
  })
  it('holds once the shell is dried out, and says when the day has passed', () => {
    const ready = queueTree({ state: 'ready for burnout', pourDate: '2026-10-13' })
    expect(pourVerdict(ready, CONTEXT)).toBe('holds')
    expect(pourVerdict(ready, { ...CONTEXT, now: at('2026-10-14T00:00:00Z') })).toBe('passed')
  })
  it('has no verdict without a pour date, after release, or on what is not foreseen', () => {
    expect(pourVerdict(queueTree(), CONTEXT)).toBeNull()
    expect(pourVerdict(queueTree({ state: 'released', pourDate: '2026-10-16' }), CONTEXT)).toBeNull()
    expect(pourVerdict(queueTree({ pourDate: '2026-10-16' }), CONTEXT)).toBe('not in sight')
  })
  it('is said with the day', () => {
    expect(pourSentence('tight', '2026-10-16')).toBe('tight for its pour, Fri 16 Oct: nothing may slip')
  })
})

describe('groupForBurnout', () => {
  it('sorts open trees by what keeps them from the kiln, nearest pour first', () => {
    const trees = [
      queueTree({ tag: 'T-1', state: 'ready for burnout', pourDate: '2026-10-20' }),
      queueTree({ tag: 'T-2', state: 'ready for burnout', pourDate: '2026-10-16' }),
      queueTree({ tag: 'T-3', state: 'dried out' }),
      queueTree({ tag: 'T-4', state: 'unknown', next: null }),
      queueTree({ tag: 'T-5', state: 'held', pourDate: '2026-10-16' }),
      queueTree({ tag: 'T-6', state: 'drying' }),
      queueTree({ tag: 'T-7', state: 'drying', pourDate: '2026-10-16' }),
      queueTree({ tag: 'T-8', state: 'released' }),
    ]
    const groups = groupForBurnout(trees)
    expect(groups.ready.map((tree) => tree.tag)).toEqual(['T-2', 'T-1'])
    expect(groups.lastCoatOn.map((tree) => tree.tag)).toEqual(['T-4'])
    expect(groups.stillDipped.map((tree) => tree.tag)).toEqual(['T-7'])
    expect(groups.held.map((tree) => tree.tag)).toEqual(['T-5'])
    expect(inTheWay(groups, CONTEXT).map((line) => line.text)).toEqual(['1 held', '1 to look over', '1 drying out'])
  })

  it('sets apart a looked-over tree that only a person’s word keeps from its release', () => {
    const damp = queueTree({ state: 'dried out' })
    const notLookedOver = queueTree({ state: 'dried out' })
    const groups = groupForBurnout([damp, notLookedOver], {
      [damp.id]: [{ code: 'confirmation', isMet: false, text: 'Damp in store.' }],
      [notLookedOver.id]: [
        { code: 'look-over', isMet: false, text: 'Not looked over.' },
        { code: 'confirmation', isMet: false, text: 'Damp in store.' },
      ],
    })
    expect(groups.toConfirm).toEqual([damp])
    expect(groups.driedOut).toEqual([notLookedOver])
  })

  it('says nothing stands in the way of an empty room', () => {
    expect(inTheWay(groupForBurnout([]), CONTEXT)).toEqual([])
    expect([0, 1, 4].map(burnoutHeadline)).toEqual(['No tree ready for burnout', '1 tree ready for burnout', '4 trees ready for burnout'])
  })
})

describe('releaseKey', () => {
  const met: ReleaseCheck[] = [{ code: 'coats', isMet: true, text: 'Every coat is on.' }]
  const damp: ReleaseCheck[] = [...met, { code: 'confirmation', isMet: false, text: 'Damp in store.' }]
  const notLookedOver: ReleaseCheck[] = [...met, { code: 'look-over', isMet: false, text: 'Not looked over.' }]

  it('is off until something is ticked', () => {
    expect(releaseKey([], {}).isOff).toBe(true)
  })
  it('asks how a damp shell was confirmed', () => {
    const chosen = [{ id: 'a', tag: 'T-108', checks: damp }]
    expect(needsConfirmation(damp)).toBe(true)
    expect(releaseKey(chosen, {})).toEqual({ isOff: true, text: 'Say how T-108 was confirmed' })
    expect(releaseKey(chosen, { a: 'weight' })).toEqual({ isOff: false, text: 'Hold to release T-108' })
  })
  it('stays off for a tree that lacks more than that', () => {
    expect(blockingChecks(notLookedOver)).toHaveLength(1)
    expect(releaseKey([{ id: 'a', tag: 'T-108', checks: notLookedOver }], { a: 'touch' }).isOff).toBe(true)
  })
  it('counts a run', () => {
    const chosen = ['T-1', 'T-2'].map((tag) => ({ id: tag, tag, checks: met }))
    expect(releaseKey(chosen, {}).text).toBe('Hold to release 2 trees')
  })
})
