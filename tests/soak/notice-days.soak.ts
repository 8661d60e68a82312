import { describe, expect, it } from 'vitest'
import { simulateDay } from '@/tests/setup/notice-simulation'

describe('24 simulated hours of notices, long form', () => {
  it('opens no episode twice and misses none over a thousand seeds', () => {
    const faults = Array.from({ length: 1000 }, (_, seed) => simulateDay(1_000_000 + seed).faults).flat()
    expect(faults.slice(0, 10)).toEqual([])
  })
})
