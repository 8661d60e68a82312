import type { Clock } from '@/lib/core/clock'
import { localDay } from '@/lib/format/local-time'
import { loadFoundry } from '@/lib/queries/load-foundry'
import type { ShiftHours } from '@/lib/schedule/shifts'
import { Closure } from '@/models'

export type ClosureRow = { id: string; name: string; firstDay: string; lastDay: string; isNow: boolean }

export type HoursAndClosedDays = {
  hours: readonly ShiftHours[]
  /** Those that last until today or beyond, the next first. */
  upcoming: ClosureRow[]
  /** The newest first. */
  past: ClosureRow[]
}

/** The hours of the week and the closed days, as they stand on the foundry's own day. */
export async function loadHoursAndClosedDays({ clock }: { clock: Clock }): Promise<HoursAndClosedDays> {
  const [{ calendar, timeZone }, closures] = await Promise.all([
    loadFoundry(),
    Closure.findAll({
      order: [
        ['firstDay', 'ASC'],
        ['lastDay', 'ASC'],
      ],
    }),
  ])
  const today = localDay(clock.now(), timeZone)
  const rows = closures.map(({ id, name, firstDay, lastDay }) => ({
    id,
    name,
    firstDay,
    lastDay,
    isNow: firstDay <= today && today <= lastDay,
  }))
  return {
    hours: calendar.hours,
    upcoming: rows.filter(({ lastDay }) => lastDay >= today),
    past: rows.filter(({ lastDay }) => lastDay < today).toReversed(),
  }
}
