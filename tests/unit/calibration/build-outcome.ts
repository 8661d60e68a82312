import type { ClockNow, Outcome, RecipeCoatNow } from '@/lib/calibration/types'
import { RECESS_FACTOR } from '@/lib/drying/need'

export const HOUR = 3_600_000
export const COVERED_AT = Date.parse('2026-10-13T09:00:00Z')

let count = 0

/** A finished coat that is learned from: coat 3 of one recipe, dry five hours after its stucco and an hour later than likely. */
export function buildOutcome(overrides: Partial<Outcome> = {}): Outcome {
  count += 1
  const startedAt = COVERED_AT - 8 * HOUR
  return {
    coatId: `coat ${count}`,
    tag: `T-${count}`,
    recipeId: 'recipe',
    number: 3,
    kind: 'backup',
    stucco: 'medium',
    way: 'dip',
    moistureTarget: 0.1,
    recessClass: 'none',
    placeId: 'rack',
    dippedAt: startedAt - 60_000,
    startedAt,
    coveredAt: COVERED_AT,
    roughMinutes: 0,
    isOtherWork: false,
    moistureRatioBelow: 0,
    dippedBy: { id: 'maud', name: 'Maud' },
    theta: 0.12,
    sd: 0.08,
    dryAt: startedAt + 5 * HOUR,
    gapShare: 0,
    forecast: { earliestAt: startedAt + 3 * HOUR, likelyAt: startedAt + 4 * HOUR, safeAt: startedAt + 5.5 * HOUR },
    atDip: { recipeReferenceHours: 4, recessFactor: 1, airFactor: 1 },
    hasMoved: false,
    isTypedOnly: false,
    hasChangedAir: false,
    isAirAsNow: true,
    ...overrides,
  }
}

export const buildPlanned = (overrides: Partial<RecipeCoatNow> = {}): RecipeCoatNow => ({
  recipeId: 'recipe',
  number: 3,
  kind: 'backup',
  stucco: 'medium',
  moistureTarget: 0.1,
  needReferenceHours: 4,
  needSpread: 0.25,
  calibratedByCoats: null,
  ...overrides,
})

export const buildClock = (overrides: Partial<ClockNow> = {}): ClockNow => ({
  recipeCoats: [buildPlanned()],
  airFactors: new Map([
    ['rack', 1],
    ['loft', 1],
  ]),
  recessFactors: RECESS_FACTOR,
  ...overrides,
})

export const times = <Item>(length: number, make: (index: number) => Item): Item[] => Array.from({ length }, (_, index) => make(index))
