import type { Metadata } from 'next'
import { KeyLink } from '@/app/_components/key'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { SensorRows } from '@/app/(office)/settings/sensors/_components/sensor-rows'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { loadSensorList } from '@/lib/queries/sensor-list'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Sensors' }

/** What reads the air, and the tokens with which loggers send. */
export default async function SensorsPage() {
  const member = await requireMemberPage('sensors', '/settings/sensors')
  const [sensors, { timeZone }] = await Promise.all([loadSensorList({ clock: systemClock }), loadFoundry()])
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div className="min-w-0 grow">
          <h1>Sensors</h1>
          <p>What reads the air of the room. A logger sends with a token of its own.</p>
        </div>
        <KeyLink href="/room/upload">Readings from a file</KeyLink>
      </div>
      <SensorRows sensors={sensors} reading={{ now: systemClock.now(), timeZone, units: member.units }} hasOwnPages />
    </>
  )
}
