import { describe, expect, it } from 'vitest'
import { simulateDay } from '@/tests/setup/notice-simulation'

// The short form; `npm run soak` runs a thousand seeds.
describe('24 simulated hours of notices', () => {
  it.each([0, 1, 2])('opens no episode twice and misses none, hundred %i', { timeout: 60_000 }, (hundred) => {
    const days = Array.from({ length: 100 }, (_, n) => simulateDay(hundred * 100 + n))
    expect(days.flatMap(({ faults }) => faults).slice(0, 5)).toEqual([])
    // A day in which nothing is told would prove nothing.
    expect(Math.min(...days.map(({ told }) => told))).toBeGreaterThan(4)
  })
})
