import type { Metadata } from 'next'
import { PushKeeper } from '@/app/_components/push-keeper'
import { UnitsProvider } from '@/app/_components/units-context'
import { systemClock } from '@/lib/core/clock'
import { setUpLines } from '@/lib/floor/set-up'
import { may, ROLES } from '@/lib/members/roles'
import { loadQueue } from '@/lib/queries/queue'
import { loadSetUp } from '@/lib/queries/set-up'
import { requireMemberPage } from '@/lib/server/auth'
import { FloorBoard } from './_components/floor-board'
import './floor.css'

export const metadata: Metadata = { title: 'Floor' }

export default async function FloorPage({ searchParams }: PageProps<'/floor'>) {
  const { name, role, units } = await requireMemberPage('see', '/floor')
  const wanted = (await searchParams)['for']
  const neededRole = ROLES.find((candidate) => candidate === wanted) ?? null
  const initial = await loadQueue({ clock: systemClock })
  // What to do about an empty floor, for those who can.
  const setUp = initial.queue.trees.length === 0 && may(role, 'trees') ? setUpLines(await loadSetUp(), role) : []
  return (
    <UnitsProvider units={units}>
      <PushKeeper />
      <FloorBoard initial={initial} serverNow={systemClock.now()} member={{ name, role }} setUp={setUp} neededRole={neededRole} />
    </UnitsProvider>
  )
}
