import type { Metadata } from 'next'
import { FoundryNav } from '@/app/(office)/_components/foundry-nav'
import { EmptyState } from '@/app/(office)/_components/empty-state'
import { KeyLink } from '@/app/_components/key'
import { PlaceRows } from '@/app/(office)/settings/places/_components/place-rows'
import '@/app/(office)/settings/settings.css'
import { systemClock } from '@/lib/core/clock'
import { loadPlaceList } from '@/lib/queries/place-list'
import { requireMemberPage } from '@/lib/server/auth'

export const metadata: Metadata = { title: 'Places' }

/** Where trees hang, and the air there. */
export default async function PlacesPage() {
  const member = await requireMemberPage('places', '/settings/places')
  const places = await loadPlaceList({ clock: systemClock })
  return (
    <>
      <FoundryNav role={member.role} />
      <div className="page-head">
        <div>
          <h1>Places</h1>
          <p>Where trees hang. The air there decides how fast a coat dries.</p>
        </div>
      </div>
      {places.sensors.length === 0 && places.inUse.length === 0 ? (
        <EmptyState
          title="No place yet"
          action={
            <KeyLink href="/settings/sensors" tone="go">
              To the sensors
            </KeyLink>
          }
        >
          Every rack, rail and corner where trees hang stands here. A place is served by a sensor, so the sensor comes first.
        </EmptyState>
      ) : (
        <PlaceRows places={places} />
      )}
    </>
  )
}
