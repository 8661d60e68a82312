import type { Metadata } from 'next'
import { PushKeeper } from '@/app/_components/push-keeper'
import { UnitsProvider } from '@/app/_components/units-context'
import { systemClock } from '@/lib/core/clock'
import { loadQueue } from '@/lib/queries/queue'
import { requireMemberPage } from '@/lib/server/auth'
import { FloorBoard } from './_components/floor-board'
import './floor.css'

export const metadata: Metadata = { title: 'Floor' }

export default async function FloorPage() {
  const { name, role, units } = await requireMemberPage('see', '/floor')
  const initial = await loadQueue({ clock: systemClock })
  return (
    <UnitsProvider units={units}>
      <PushKeeper />
      <FloorBoard initial={initial} serverNow={systemClock.now()} member={{ name, role }} />
    </UnitsProvider>
  )
}
