'use client'

import { signOutHere } from '@/app/_components/sign-out'
import { Key, KeyLink } from '@/app/_components/key'

/** The way out of the page without a change: back to one's own page, or out altogether while nothing else is open. */
export function LeaveKeys({ isFirst }: { isFirst: boolean }) {
  return isFirst ? (
    <Key size={56} tone="quiet" onPress={() => void signOutHere()}>
      Sign out
    </Key>
  ) : (
    <KeyLink size={56} tone="quiet" href="/me">
      Cancel
    </KeyLink>
  )
}
