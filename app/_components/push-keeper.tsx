'use client'

import { lazy, Suspense, useSyncExternalStore } from 'react'
import { hasMark } from '@/app/_components/push-mark'

const KeptPush = lazy(() => import('@/app/_components/kept-push'))

// Once per page load is often enough.
const neverChanges = () => () => {}
const onServer = () => false

/** Shows nothing. Belongs on every page of a signed-in member, so that a device which was turned on stays on. */
export function PushKeeper() {
  const wasTurnedOn = useSyncExternalStore(neverChanges, hasMark, onServer)
  return wasTurnedOn ? (
    <Suspense fallback={null}>
      <KeptPush />
    </Suspense>
  ) : null
}
