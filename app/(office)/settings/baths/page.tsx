import type { Metadata } from 'next'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { BathRows } from '@/app/(office)/settings/baths/_components/bath-rows'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { loadBathList } from '@/lib/queries/bath-list'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Baths' }

/** The slurry baths. */
export default async function BathsPage() {
  const member = await requireMemberPage('baths', '/settings/baths')
  const [baths, { timeZone }] = await Promise.all([loadBathList(), loadFoundry()])
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>Baths</h1>
          <p>The slurries that trees are dipped in. The floor groups its dips by them.</p>
        </div>
      </div>
      <BathRows baths={baths} now={systemClock.now()} timeZone={timeZone} />
    </>
  )
}
