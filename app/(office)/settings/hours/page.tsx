import type { Metadata } from 'next'
import { Plate } from '@/app/_components/plate'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { ClosureRows } from '@/app/(office)/settings/hours/_components/closure-rows'
import { HoursForm } from '@/app/(office)/settings/hours/_components/hours-form'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { may } from '@/lib/members/roles'
import { loadHoursAndClosedDays } from '@/lib/queries/closed-days'
import { weekWords } from '@/lib/schedule/week-words'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Hours and closed days' }

/** When the foundry works: the hours of its week, and the days on which it does not. */
export default async function HoursPage() {
  const member = await requireMemberPage('places', '/settings/hours')
  const { hours, upcoming, past } = await loadHoursAndClosedDays({ clock: systemClock })
  const mayChange = may(member.role, 'settings')
  const spans = hours.map(({ weekday, opensMinute, closesMinute }) => ({ weekday, fromMinute: opensMinute, toMinute: closesMinute }))
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>Hours and closed days</h1>
          <p>Coats dry round the clock; dips are foreseen in the shifts only. Fans keep their own timetables, on closed days too.</p>
        </div>
      </div>
      <div className="settings-page">
        <Plate title="Shift hours" line={mayChange ? 'wall-clock time, also when the clocks change' : 'an owner can change them'}>
          {mayChange ? <HoursForm hours={hours} /> : <p className="text-18">{weekWords(spans, 'Around the clock: no hours are set.')}</p>}
        </Plate>
        <h2 className="settings-title">Closed days</h2>
        <ClosureRows upcoming={upcoming} past={past} mayChange={mayChange} />
      </div>
    </>
  )
}
