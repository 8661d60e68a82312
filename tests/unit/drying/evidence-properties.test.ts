import * as fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { learnFromCoat, observeMoisture, priorOf, sharedBefore, thetaPosterior, type Observation, type Theta } from '@/lib/drying/evidence'
import { moistureRatio } from '@/lib/drying/moisture'

const number = (min: number, max: number) => fc.double({ min, max, noNaN: true })

const prior: fc.Arbitrary<Theta> = fc.record({ mean: number(-0.2, 0.2), sd: number(0.05, 0.3) })
const verdict = (kind: 'dry' | 'not yet'): fc.Arbitrary<Observation> =>
  fc.record({ kind: fc.constant(kind), lnDoseOverNeed: number(-0.8, 0.8), scatter: number(0.08, 0.25) })
const value: fc.Arbitrary<Observation> = fc.record({ kind: fc.constant('value' as const), theta: number(-0.6, 0.6), sd: number(0.04, 0.3) })
const observation = fc.oneof(verdict('dry'), verdict('not yet'), value)
const several = fc.array(observation, { minLength: 1, maxLength: 5 })

/** What the grid of 401 points itself leaves open. */
const GRID = 1e-6

describe('evidence of any sort', () => {
  it('does not depend on its order', () => {
    const inTwoOrders = several.chain((seen) =>
      fc.tuple(fc.constant(seen), fc.shuffledSubarray(seen, { minLength: seen.length, maxLength: seen.length })),
    )
    fc.assert(
      fc.property(prior, inTwoOrders, (before, [seen, shuffled]) => {
        const [one, other] = [thetaPosterior(before, seen), thetaPosterior(before, shuffled)]
        expect(Math.abs(one.mean - other.mean)).toBeLessThan(1e-12)
        expect(Math.abs(one.sd - other.sd)).toBeLessThan(1e-12)
      }),
      { numRuns: 60 },
    )
  })

  it('of a dry coat never raises theta, of one that is not yet dry never lowers it, whatever is known already', () => {
    fc.assert(
      fc.property(prior, fc.array(observation, { maxLength: 4 }), verdict('dry'), verdict('not yet'), (before, known, dry, notYet) => {
        const { mean } = thetaPosterior(before, known)
        expect(thetaPosterior(before, [...known, dry]).mean).toBeLessThanOrEqual(mean + GRID)
        expect(thetaPosterior(before, [...known, notYet]).mean).toBeGreaterThanOrEqual(mean - GRID)
      }),
      { numRuns: 60 },
    )
  })

  // Of the prior, a Gauss, every log-concave likelihood narrows the spread (Brascamp and Lieb 1976). A piece that denies the one before
  // may widen what that one had left.
  it('leaves a spread no wider than the prior', () => {
    fc.assert(
      fc.property(prior, several, (before, seen) => {
        expect(thetaPosterior(before, seen).sd).toBeLessThanOrEqual(before.sd + GRID)
        // Something that lies within the reach of the prior says something.
        const [first] = seen
        const isNews = first?.kind !== 'value' || thetaPosterior(before, [first]).sd < before.sd * (1 - 1e-3)
        expect(isNews).toBe(true)
      }),
      { numRuns: 60 },
    )
  })

  it('says more the earlier a coat feels dry, and the later one does not', () => {
    fc.assert(
      fc.property(prior, number(-0.6, 0.6), number(0.05, 0.4), number(0.08, 0.25), (before, lnDoseOverNeed, later, scatter) => {
        const meanOf = (kind: 'dry' | 'not yet', at: number) => thetaPosterior(before, [{ kind, lnDoseOverNeed: at, scatter }]).mean
        expect(meanOf('dry', lnDoseOverNeed)).toBeLessThanOrEqual(meanOf('dry', lnDoseOverNeed + later) + GRID)
        expect(meanOf('not yet', lnDoseOverNeed)).toBeLessThanOrEqual(meanOf('not yet', lnDoseOverNeed + later) + GRID)
      }),
      { numRuns: 60 },
    )
  })
})

describe('a weighing', () => {
  it('of a coat that truly needs more or less says by how much', () => {
    fc.assert(
      fc.property(number(-0.5, 0.5), number(0.05, 1.2), number(0.5, 20), number(0.02, 0.3), (theta, share, need, moistureTarget) => {
        const dose = share * need
        const seen = observeMoisture({ dose, need, moistureTarget }, moistureRatio(dose, need * Math.exp(theta), moistureTarget))
        fc.pre(seen?.kind === 'value')
        expect(seen).toMatchObject({ theta: expect.closeTo(theta, 9) })
      }),
    )
  })
})

describe("what one coat says of its tree's next", () => {
  it('moves them in the same direction and by less, and leaves them no less sure', () => {
    fc.assert(
      fc.property(number(0.12, 0.4), several, (spread, seen) => {
        const shared = sharedBefore(spread)
        const own = priorOf(shared)
        const posterior = thetaPosterior(own, seen)
        const after = learnFromCoat(shared, own, posterior)
        const next = priorOf(after)
        expect(Math.abs(next.mean)).toBeLessThanOrEqual(Math.abs(posterior.mean) + GRID)
        expect(next.mean * posterior.mean).toBeGreaterThanOrEqual(-GRID)
        expect(next.sd).toBeLessThanOrEqual(own.sd + GRID)
        // A coat has something of its own: the next is never as sure as a coat that was measured.
        expect(after.variance).toBeGreaterThanOrEqual(0)
        expect(next.sd).toBeGreaterThan(0.1)
      }),
      { numRuns: 60 },
    )
  })
})
