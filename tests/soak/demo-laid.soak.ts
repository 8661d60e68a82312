import { expect, it } from 'vitest'

const MINUTE_MS = 60_000
const HOUR_MS = 60 * MINUTE_MS

/** Through a week in winter, and through the days round each clock change, at odd minutes, seconds and milliseconds. */
const starts = [
  ['2026-11-30T00:03:20.001Z', 24],
  ['2026-03-28T00:17:41.499Z', 8],
  ['2026-10-24T00:41:02.667Z', 8],
].flatMap(([from, count]) =>
  Array.from({ length: Number(count) }, (_, step) => Date.parse(String(from)) + step * (7 * HOUR_MS + 11 * MINUTE_MS + 7)),
)

it.each(['2026-12-01T17:42:20.000Z', ...starts.map((now) => new Date(now).toISOString())])(
  'the demo is laid at %s, and taken away again',
  async (iso) => {
    const { seedDemo } = await import('@/lib/demo/seed')
    const { removeDemo } = await import('@/lib/demo/remove-demo')
    const { Member, Tree } = await import('@/models')
    const clock = { now: () => Date.parse(iso) }
    await seedDemo({ clock, scryptCost: 1024 })
    expect(await Tree.count({ where: { releasedAt: null, scrappedAt: null } })).toBe(32)
    const { id, name, role } = await Member.findOne({ where: { role: 'owner' }, rejectOnEmpty: true })
    expect(await removeDemo({ member: { id, name, role, isDemo: true }, clock })).toMatchObject({ kept: [], isEmptied: true })
  },
)
