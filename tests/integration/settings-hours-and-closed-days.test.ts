import { beforeAll, describe, expect, it } from 'vitest'
import { addClosure, changeClosure, removeClosure } from '@/lib/commands/save-closure'
import { saveShiftHours } from '@/lib/commands/save-shift-hours'
import type { Actor } from '@/lib/members/actor'
import { loadHoursAndClosedDays } from '@/lib/queries/closed-days'
import { loadFloor } from '@/lib/queries/floor'
import { loadQueue } from '@/lib/queries/queue'
import { ShiftHours } from '@/models'
import { buildTree, NOW, stoppedClock, type TestFoundry } from '@/tests/factories/shell-room'

import { historyOf, openSettings } from '@/tests/factories/settings'

let foundry: TestFoundry
let ines: Actor
const clock = stoppedClock()
const by = () => ({ member: ines, clock })

beforeAll(async () => {
  ;({ foundry, ines } = await openSettings())
})

describe('hours and closed days', () => {
  it('are kept with what was before', async () => {
    const hours = [1, 2, 3, 4, 5].map((weekday) => ({ weekday, opensMinute: weekday === 5 ? 480 : 420, closesMinute: 1020 }))
    await saveShiftHours([...hours, { weekday: 6, opensMinute: 480, closesMinute: 720 }], by())
    await saveShiftHours([...hours, { weekday: 6, opensMinute: 480, closesMinute: 720 }], by())
    expect((await historyOf('hours')).map(({ detail }) => detail)).toEqual([
      {
        text: 'Shift hours changed.',
        before: { Friday: '07:00–17:00', Saturday: 'closed' },
        after: { Friday: '08:00–17:00', Saturday: '08:00–12:00' },
      },
    ])
    expect(await ShiftHours.count()).toBe(6)
    await saveShiftHours(
      hours.map((row) => ({ ...row, opensMinute: 420 })),
      by(),
    )
  })

  it('are added, changed and removed', async () => {
    const { closureId } = await addClosure({ name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-03' }, by())
    await changeClosure(closureId, { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, by())
    await removeClosure(closureId, by())
    expect(
      (await historyOf('closure', closureId)).map(({ kind, detail }) => ({ kind, before: detail['before'], after: detail['after'] })),
    ).toEqual([
      { kind: 'closed days added', before: undefined, after: { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-03' } },
      { kind: 'closed days changed', before: { lastDay: '2026-11-03' }, after: { lastDay: '2026-11-04' } },
      { kind: 'closed days removed', before: { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, after: undefined },
    ])
    await expect(removeClosure(closureId, by())).rejects.toMatchObject({ code: 'not_found' })
    await expect(changeClosure(closureId, { name: 'Fair', firstDay: '2026-11-02', lastDay: '2026-11-04' }, by())).rejects.toMatchObject({
      code: 'not_found',
    })
  })

  it('come with the next first, those that are over apart', async () => {
    const add = (name: string, firstDay: string, lastDay: string) => addClosure({ name, firstDay, lastDay }, by())
    const added = [
      await add('Winter', '2026-12-24', '2027-01-03'),
      await add('Today', '2026-10-12', '2026-10-13'),
      await add('Summer', '2026-08-03', '2026-08-21'),
      await add('Whitsun', '2026-05-25', '2026-05-25'),
    ]
    const { upcoming, past } = await loadHoursAndClosedDays({ clock })
    expect(upcoming.map(({ name, isNow }) => [name, isNow])).toEqual([
      ['Today', true],
      ['Winter', false],
    ])
    expect(past.map(({ name }) => name)).toEqual(['Summer', 'Whitsun'])
    for (const { closureId } of added) await removeClosure(closureId, by())
  })

  it('move the tide, the next dip and the pour with them', async () => {
    const tree = await buildTree(foundry, { pourDate: '2026-10-21' })
    const seen = async () => {
      const { queue } = (await loadQueue({ clock })) ?? {}
      const [derived] = (await loadFloor({ now: NOW, trees: { ids: [tree.id] } })).trees
      return { nextStartsAt: queue.shift.nextStartsAt, first: derived!.plannedDips[0]!.likelyAt, willMiss: derived!.willMissPour }
    }
    const open = await seen()
    expect(new Date(open.nextStartsAt).toISOString()).toBe('2026-10-14T06:00:00.000Z')
    expect(open.first).toBe(NOW)
    expect(open.willMiss).toBe(false)
    // Closed from today on for three weeks, over the end of summer time.
    const { closureId } = await addClosure({ name: 'Flood', firstDay: '2026-10-13', lastDay: '2026-11-03' }, by())
    const closed = await seen()
    expect(new Date(closed.nextStartsAt).toISOString()).toBe('2026-11-04T07:00:00.000Z')
    expect(closed.first).toBe(closed.nextStartsAt)
    expect(closed.willMiss).toBe(true)
    await removeClosure(closureId, by())
    expect(await seen()).toEqual(open)
  })
})
