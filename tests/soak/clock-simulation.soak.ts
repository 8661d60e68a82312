import { expect, it } from 'vitest'
import { figuresOf, simulateFoundry } from '@/tests/factories/clock-simulation'

it('the clock holds what it promises over two hundred simulated foundries', { timeout: 1_800_000 }, () => {
  const figures = figuresOf(Array.from({ length: 200 }, (_, index) => simulateFoundry(1001 + index)))
  process.stdout.write(`${JSON.stringify(figures, null, 2)}\n`)
  const { timer, untrained, ...trained } = figures
  expect(untrained.medianErrorMinutes).toBeLessThan(timer.medianErrorMinutes)
  for (const way of ['with evidence', 'after learning', 'after learning, with evidence'] as const) {
    expect(trained[way].medianErrorMinutes).toBeLessThan(untrained.medianErrorMinutes)
    expect(trained[way].insidePct).toBeGreaterThan(70)
    expect(trained[way].insidePct).toBeLessThan(90)
  }
})
