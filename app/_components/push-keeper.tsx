'use client'

import { useKeptPush } from '@/app/_components/use-push'

/** Shows nothing. Belongs on every page of a signed-in member, so that a device which was turned on stays on. */
export function PushKeeper() {
  useKeptPush()
  return null
}
