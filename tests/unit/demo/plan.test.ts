import { describe, expect, it } from 'vitest'
import { demoAirAt } from '@/lib/demo/climate'
import { demoClimate, planDemoAnyhow } from '@/lib/demo/plan'

const HOUR_MS = 3_600_000
const NOW = Date.parse('2026-11-30T20:00:00Z')
const days = (weekdays: number[], opensMinute: number, closesMinute: number) => ({
  hours: weekdays.map((weekday) => ({ weekday, opensMinute, closesMinute })),
  closures: [],
})

// The planning works for a second, longer on a busy machine.
describe('the demo in somebody’s foundry', { timeout: 60_000 }, () => {
  it.each([
    ['Mexico City, 2,240 m up', { timeZone: 'America/Mexico_City', altitudeM: 2240, calendar: days([1, 2, 3, 4, 5], 480, 1080) }],
    ['Auckland', { timeZone: 'Pacific/Auckland', altitudeM: 20, calendar: days([1, 2, 3, 4, 5, 6], 420, 1020) }],
    ['a foundry without hours', { timeZone: 'Asia/Tokyo', altitudeM: 20, calendar: days([], 0, 0) }],
  ])('keeps the hours of %s', (_name, setting) => {
    const { plan, isInOwnHours } = planDemoAnyhow(NOW, setting)
    expect(isInOwnHours).toBe(true)
    expect(plan.trees.filter(({ leftAt }) => leftAt === null)).toHaveLength(32)
  })

  it('keeps its own hours where two weeks of work do not fit into those of the foundry', () => {
    const { plan, isInOwnHours } = planDemoAnyhow(NOW, { timeZone: 'Europe/Rome', altitudeM: 20, calendar: days([2, 4], 540, 720) })
    expect(isInOwnHours).toBe(false)
    expect(plan.trees.filter(({ leftAt }) => leftAt === null)).toHaveLength(32)
  })

  it('has its damp nights when it is night there', () => {
    const midday = Date.parse('2026-11-28T23:00:00Z')
    const humidity = (at: number) => demoAirAt(demoClimate(NOW - 14 * 24 * HOUR_MS, 'Pacific/Auckland'), 'shell room', at).relHumidityPct
    // 12:00 in Auckland is 23:00 UTC the day before; a Sunday, so that no dehumidifier runs.
    expect(humidity(midday + 16.5 * HOUR_MS)).toBeGreaterThan(humidity(midday + 4.5 * HOUR_MS) + 10)
  })
})
