import type { Metadata } from 'next'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { FoundryFacts } from '@/app/(office)/settings/_components/foundry-facts'
import { FoundryForm } from '@/app/(office)/settings/_components/foundry-form'
import { foundryFormValues } from '@/lib/foundry/foundry-input'
import { timeZones } from '@/lib/foundry/time-zones'
import { may } from '@/lib/members/roles'
import { loadFoundrySettings } from '@/lib/queries/foundry-settings'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'The foundry' }

/** Name, zone, altitude, units, and the room that the recipes were made for. */
export default async function SettingsPage() {
  const member = await requireMemberPage('places', '/settings')
  const foundry = await loadFoundrySettings()
  const unit = member.units.temp
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>{foundry.name}</h1>
          <p>What holds for the whole foundry. Each change stands in the history, with what was before.</p>
        </div>
      </div>
      {may(member.role, 'settings') ? (
        <FoundryForm values={foundryFormValues(foundry, unit)} shown={unit} zones={timeZones()} />
      ) : (
        <FoundryFacts foundry={foundry} unit={unit} />
      )}
    </>
  )
}
