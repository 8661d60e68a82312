import { describe, expect, it } from 'vitest'
import { planDemo } from '@/lib/demo/plan'
import { DEMO_SETTING } from '@/lib/demo/shop'
import { troubleOfStory } from '@/tests/setup/demo-story'

describe('the past of the demo can be acted out', () => {
  // The first two have a look at a third of a wait that three does not divide; the others are the clock changes of London.
  it.each(['2026-12-01T17:42:20Z', '2026-12-01T16:42:20Z', '2026-03-29T00:59:59Z', '2026-10-25T01:00:00Z'])(
    'at a first start at %s',
    { timeout: 60_000 },
    (iso) => {
      expect(troubleOfStory(planDemo(Date.parse(iso), DEMO_SETTING))).toEqual([])
    },
  )
})
