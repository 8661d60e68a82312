import { describe, expect, it } from 'vitest'
import { planDemo } from '@/lib/demo/plan'
import { DEMO_SETTING } from '@/lib/demo/shop'
import { oddness } from '@/lib/demo/work-hours'

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS

/** Starts at every hour of the week by and by, round each clock change and in between. */
const starts = ['2026-10-19T00:13:00Z', '2026-12-21T02:41:00Z', '2027-03-22T01:07:00Z'].flatMap((from) =>
  Array.from({ length: 40 }, (_, step) => Date.parse(from) + step * (7 * HOUR_MS + 37 * MINUTE_MS)),
)

describe('the demo, planned for a first start at any hour', () => {
  it.each(starts.map((now) => [new Date(now).toISOString(), now] as const))('%s', (_iso, now) => {
    const { trees, hours } = planDemo(now, DEMO_SETTING)
    expect(trees.filter(({ leftAt }) => leftAt === null)).toHaveLength(32)
    expect(trees.some(({ tree }) => tree.story?.kind === 'dipped early' && tree.story.overCoat !== undefined)).toBe(true)
    for (const { coats, createdAt, intakeAt, lookOverAt, leftAt, tag } of trees) {
      const order = [createdAt, intakeAt, ...coats.map(({ dippedAt }) => dippedAt), lookOverAt, leftAt].filter((at) => at !== null)
      expect(order, tag).toEqual(order.toSorted((a, b) => a - b))
      expect(order.at(-1), tag).toBeLessThanOrEqual(now)
    }
    // Nobody is put to work at night for the picture's sake, but for the newest coats of a start at night.
    const atNight = trees.flatMap(({ coats }) => coats.slice(0, -1)).filter(({ dippedAt }) => oddness(hours, dippedAt) > 1)
    expect(atNight).toEqual([])
  })
})
