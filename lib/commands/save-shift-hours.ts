import { addFoundryEvent } from '@/lib/commands/foundry-event'
import type { Clock } from '@/lib/core/clock'
import type { Actor } from '@/lib/members/actor'
import { changedFields } from '@/lib/members/changed-fields'
import { formatMinute } from '@/lib/schedule/clock-text'
import type { ShiftHours as Hours } from '@/lib/schedule/shifts'
import { WEEKDAYS, weekdayWord } from '@/lib/schedule/week-words'
import { inTransaction, ShiftHours } from '@/models'

/** Sets the shift hours of the week; a weekday that is not in it is closed. */
export function saveShiftHours(hours: readonly Hours[], { member, clock }: { member: Actor; clock: Clock }): Promise<void> {
  return inTransaction(async () => {
    const changed = changedFields(inWords(await ShiftHours.findAll()), inWords(hours))
    if (Object.keys(changed.after).length === 0) return
    await ShiftHours.destroy({ where: {} })
    await ShiftHours.bulkCreate([...hours])
    await addFoundryEvent(
      { type: 'hours' },
      { kind: 'shift hours changed', by: member, at: clock.now(), text: 'Shift hours changed.', ...changed },
    )
  })
}

function inWords(hours: readonly Hours[]): Record<string, string> {
  const wordsOf = (weekday: number) => {
    const row = hours.find((candidate) => candidate.weekday === weekday)
    return row ? `${formatMinute(row.opensMinute)}–${formatMinute(row.closesMinute)}` : 'closed'
  }
  return Object.fromEntries(WEEKDAYS.map((weekday) => [weekdayWord(weekday), wordsOf(weekday)]))
}
