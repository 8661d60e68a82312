import { describe, expect, it } from 'vitest'
import { planDemo, planDemoAnyhow } from '@/lib/demo/plan'
import { DEMO_SETTING, type DemoSetting } from '@/lib/demo/shop'
import { oddness } from '@/lib/demo/work-hours'
import { troubleOfStory } from '@/tests/setup/demo-story'

const SECOND_MS = 1000
const MINUTE_MS = 60 * SECOND_MS
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

const AUCKLAND: DemoSetting = { ...DEMO_SETTING, timeZone: 'Pacific/Auckland' }
/** Never at the same second, which an even step would be. */
const STEP_MS = 9 * MINUTE_MS + 13 * SECOND_MS + 7

describe('the past of the demo can be acted out, started at any moment of', () => {
  it.each([
    ['a Tuesday', '2026-12-01T00:00:00Z', DEMO_SETTING],
    ['a Saturday', '2026-12-05T00:00:00Z', DEMO_SETTING],
    ['a Sunday', '2026-12-06T00:00:00Z', DEMO_SETTING],
    ['a Monday', '2026-12-07T00:00:00Z', DEMO_SETTING],
    ['the day on which summer time begins', '2026-03-29T00:00:00Z', DEMO_SETTING],
    ['the day on which summer time ends', '2026-10-25T00:00:00Z', DEMO_SETTING],
    ['the day on which it ends in Auckland', '2027-04-03T12:00:00Z', AUCKLAND],
    ['the day on which it begins in Auckland', '2026-09-26T12:00:00Z', AUCKLAND],
  ] as const)('%s', (_day, from, setting) => {
    const first = Date.parse(from)
    const troubles: string[] = []
    for (let now = first; now < first + 25 * HOUR_MS; now += STEP_MS) {
      const trouble = troubleOfStory(planDemoAnyhow(now, setting).plan)
      if (trouble.length > 0) troubles.push(`${new Date(now).toISOString()}: ${trouble.join('; ')}`)
    }
    expect(troubles).toEqual([])
  })
})
