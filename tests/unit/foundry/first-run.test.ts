import { describe, expect, it } from 'vitest'
import { FIRST_RUN_STEPS, firstRunStep, isStepOpen, missingFor, stepAfter, type FirstRunStep } from '@/lib/foundry/first-run'

describe('the steps of the first run', () => {
  it('follow each other to the last', () => {
    let step: FirstRunStep = 'foundry'
    const walked: FirstRunStep[] = [step]
    for (let count = 0; count < 20 && step !== 'done'; count += 1) {
      step = stepAfter(step)
      walked.push(step)
    }
    expect(walked).toEqual(FIRST_RUN_STEPS)
    expect(stepAfter('done')).toBe('done')
  })
  it('are open as far as somebody has come, and no further', () => {
    expect(FIRST_RUN_STEPS.filter((step) => isStepOpen(step, 'baths'))).toEqual(['foundry', 'hours', 'baths'])
  })
  it('are known by their names alone', () => {
    expect(firstRunStep('places')).toBe('places')
    expect(firstRunStep('constructor')).toBeNull()
    expect(firstRunStep(undefined)).toBeNull()
  })
  it('say what is missing, one thing at a time', () => {
    const nothing = { faceBaths: 0, backupBaths: 0, sensors: 0, places: 0 }
    const all = { faceBaths: 1, backupBaths: 1, sensors: 1, places: 1 }
    expect(missingFor('baths', nothing)).toMatch(/face/)
    expect(missingFor('baths', { ...nothing, faceBaths: 1 })).toMatch(/backup/)
    expect(FIRST_RUN_STEPS.filter((step) => missingFor(step, nothing) !== null)).toEqual(['baths', 'sensor', 'places'])
    expect(FIRST_RUN_STEPS.filter((step) => missingFor(step, all) !== null)).toEqual([])
  })
})
