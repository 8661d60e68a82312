import { describe, expect, it } from 'vitest'
import { checkedCoat, leftOut } from '@/lib/calibration/left-out'
import type { Outcome } from '@/lib/calibration/types'
import { buildOutcome, buildPlanned } from '@/tests/unit/calibration/build-outcome'

describe('a coat is left out', () => {
  it.each<[string, Partial<Outcome>]>([
    ['air changed', { hasChangedAir: true }],
    ['gaps', { gapShare: 0.21 }],
    ['gaps', { gapShare: null }],
    ['typed only', { isTypedOnly: true }],
    ['rough time', { roughMinutes: 20 }],
    ['other work', { isOtherWork: true }],
    ['other work', { way: 'brushed' }],
    ['recipe changed', { stucco: 'coarse' }],
    ['recipe changed', { moistureTarget: 0.05 }],
    ['recipe changed', { atDip: { recipeReferenceHours: null, recessFactor: 1, airFactor: 1 } }],
    ['wet below', { moistureRatioBelow: 0.15 }],
    ['weak', { sd: 0.3 }],
  ])('for %s: %o', (reason, change) => {
    expect(leftOut(buildOutcome(change), buildPlanned())).toBe(reason)
  })

  it('where its recipe has no coat of its number any more', () => {
    expect(leftOut(buildOutcome(), null)).toBe('recipe changed')
  })

  it('for nothing at the limits', () => {
    expect(leftOut(buildOutcome({ gapShare: 0.2, roughMinutes: 15, moistureRatioBelow: 0.1, sd: 0.25 }), buildPlanned())).toBeNull()
  })
})

describe('the times of a coat', () => {
  it('are told in hours from its stucco', () => {
    expect(checkedCoat(buildOutcome())).toMatchObject({ earliestHours: 3, likelyHours: 4, safeHours: 5.5, dryHours: 5 })
  })

  it('tell nothing where it was dipped over before it was dry, or no time was promised', () => {
    expect(checkedCoat(buildOutcome({ dryAt: null }))).toBeNull()
    expect(checkedCoat(buildOutcome({ forecast: null }))).toBeNull()
    // Moved or early, it still tells of the need.
    expect(leftOut(buildOutcome({ dryAt: null, hasMoved: true }), buildPlanned())).toBeNull()
  })
})
