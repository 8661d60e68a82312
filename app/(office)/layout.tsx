import type { ReactNode } from 'react'
import { PushKeeper } from '@/app/_components/push-keeper'
import { OfficeBar } from '@/app/_components/office-bar'
import { OfficeKeys } from '@/app/(office)/_components/office-keys'
import { UnitsProvider } from '@/app/_components/units-context'
import { systemClock } from '@/lib/core/clock'
import { loadFoundry } from '@/lib/queries/load-foundry'
import { currentMember } from '@/lib/server/auth'
import './office.css'

/** Guards nothing: every page asks for its own right. Without a member the page inside is on its way to the sign-in. */
export default async function OfficeLayout({ children }: { children: ReactNode }) {
  const member = await currentMember()
  if (!member) return children
  const foundry = await loadFoundry()
  return (
    <div className="office">
      <a className="skip-link" href="#page">
        To the page
      </a>
      <header>
        <OfficeBar
          foundryName={foundry.name}
          hasDemoData={foundry.hasDemoData && !foundry.isDemo}
          timeZone={foundry.timeZone}
          member={{ name: member.name, role: member.role }}
          serverNow={systemClock.now()}
        />
      </header>
      <PushKeeper />
      <OfficeKeys role={member.role} />
      <main id="page">
        <UnitsProvider units={member.units}>{children}</UnitsProvider>
      </main>
    </div>
  )
}
