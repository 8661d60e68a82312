import { describe, expect, it } from 'vitest'
import { countedCoats, placeProposals, recessProposals, recipeCoatProposals } from '@/lib/calibration/proposals'
import type { ClockNow, Outcome } from '@/lib/calibration/types'
import { RECESS_FACTOR } from '@/lib/drying/need'
import { buildClock, buildOutcome, buildPlanned, times } from '@/tests/unit/calibration/build-outcome'

const coatOf = (outcomes: readonly Outcome[], now: ClockNow = buildClock()) => recipeCoatProposals(countedCoats(outcomes, now), now)[0]!

describe("a recipe's coat", () => {
  it('asks for a change once five coats say so', () => {
    expect(coatOf(times(4, () => buildOutcome()))).toMatchObject({ verdict: 'too few', isOpen: false, needAfter: 4 })
    const proposal = coatOf(times(5, () => buildOutcome()))
    expect(proposal).toMatchObject({ verdict: 'change', isOpen: true, needAfter: 4.44 })
    expect(proposal.spreadAfter).toBeCloseTo(Math.hypot(0.15, 0.0711), 3)
  })

  it('agrees within its own error or three percent, and may be confirmed once for so many coats', () => {
    const small = times(5, () => buildOutcome({ theta: 0.05 }))
    expect(coatOf(small)).toMatchObject({ verdict: 'agrees', isOpen: true, needAfter: 4 })
    const many = times(60, () => buildOutcome({ theta: 0.029, sd: 0.02 }))
    expect(coatOf(many)).toMatchObject({ verdict: 'agrees' })
    const confirmed = buildClock({ recipeCoats: [buildPlanned({ calibratedByCoats: 5 })] })
    expect(coatOf(small, confirmed)).toMatchObject({ verdict: 'agrees', isOpen: false })
    expect(coatOf([...small, buildOutcome({ theta: 0.05 })], confirmed).isOpen).toBe(true)
  })

  it('is learned relative to what the clock has by now: what was taken over is not proposed again', () => {
    const outcomes = times(5, () => buildOutcome())
    const after = buildClock({ recipeCoats: [buildPlanned({ needReferenceHours: 4.44, calibratedByCoats: 5 })] })
    expect(coatOf(outcomes, after)).toMatchObject({ verdict: 'agrees', isOpen: false })
    // A coat that was dipped under the newer need says the same of it as one dipped before.
    const newer = buildOutcome({ theta: 0.12 - Math.log(4.44 / 4), atDip: { recipeReferenceHours: 4.44, recessFactor: 1, airFactor: 1 } })
    const counted = countedCoats([outcomes[0]!, newer], after)
    expect(counted[0]!.said.mean).toBeCloseTo(counted[1]!.said.mean, 9)
  })

  it('takes the air of its day into account', () => {
    const now = buildClock({ airFactors: new Map([['rack', 0.8]]) })
    // The clock counts a fifth less dose there today: less than thought was needed.
    expect(countedCoats([buildOutcome()], now)[0]!.said.mean).toBeCloseTo(0.12 + Math.log(0.8), 9)
  })

  it('is learned from trees without a recess alone', () => {
    expect(coatOf(times(9, () => buildOutcome({ recessClass: 'closed core' }))).learned.count).toBe(0)
  })
})

describe("a place's air", () => {
  const rack = times(6, () => buildOutcome({ theta: 0 }))
  const loft = (change: Partial<Outcome> = {}) => times(6, () => buildOutcome({ theta: 0.4, placeId: 'loft', ...change }))
  const placesOf = (outcomes: readonly Outcome[], now = buildClock()) => placeProposals(countedCoats(outcomes, now), now)

  it('is slower where the same coats need more dose, and faster where they need less', () => {
    const [first, second] = placesOf([...rack, ...loft()])
    expect(first).toMatchObject({ subject: 'rack', verdict: 'change' })
    expect(first!.factorAfter).toBeGreaterThan(1)
    expect(second).toMatchObject({ subject: 'loft', verdict: 'change', factorBefore: 1 })
    expect(second!.factorAfter).toBeLessThan(0.95)
  })

  it('cannot be told from the recipe where coats hung at one place only', () => {
    expect(placesOf(loft())).toEqual([expect.objectContaining({ subject: 'loft', verdict: 'nothing to compare', factorAfter: 1 })])
  })

  it('is not learned from coats that were moved, or hung there in another air', () => {
    const others = [...loft({ hasMoved: true }), ...loft({ isAirAsNow: false })]
    expect(placesOf([...rack, ...others]).map(({ subject }) => subject)).toEqual(['rack'])
  })

  it('is a factor on the one it has', () => {
    const slower = { recipeReferenceHours: 4, recessFactor: 1, airFactor: 0.5 }
    const now = buildClock({
      airFactors: new Map([
        ['rack', 1],
        ['loft', 0.5],
      ]),
    })
    const [, second] = placesOf([...rack, ...loft({ atDip: slower })], now)
    expect(second!.factorBefore).toBe(0.5)
    expect(second!.factorAfter).toBeLessThan(0.5)
  })
})

describe('a recess', () => {
  const open = times(6, () => buildOutcome({ theta: 0 }))
  const core = (change: Partial<Outcome> = {}) =>
    times(6, () =>
      buildOutcome({
        theta: 0.3,
        recessClass: 'closed core',
        atDip: { recipeReferenceHours: 4, recessFactor: 2.5, airFactor: 1 },
        ...change,
      }),
    )
  const recessesOf = (outcomes: readonly Outcome[], now = buildClock()) => recessProposals(countedCoats(outcomes, now), now)

  it('dries slower where its coats need more than those of trees without one', () => {
    const [proposal] = recessesOf([...open, ...core()])
    expect(proposal).toMatchObject({ subject: 'closed core', verdict: 'change', factorBefore: 2.5 })
    // 0.3 drawn towards nothing by a prior of 0.15, six coats of 0.17 each.
    expect(proposal!.factorAfter).toBeCloseTo(2.5 * Math.exp((0.3 * 6) / 0.0289 / (1 / 0.0225 + 6 / 0.0289)), 2)
  })

  it('has nothing to compare with where no coat of the same number has five without a recess', () => {
    expect(recessesOf(core())).toEqual([expect.objectContaining({ verdict: 'nothing to compare', factorAfter: 2.5 })])
  })

  it('is learned relative to the factor it has by now', () => {
    const now = buildClock({ recessFactors: { ...RECESS_FACTOR, 'closed core': 2.5 * Math.exp(0.3) } })
    expect(recessesOf([...open, ...core()], now)[0]).toMatchObject({ verdict: 'agrees' })
  })
})
