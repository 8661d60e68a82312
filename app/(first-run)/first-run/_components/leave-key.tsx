'use client'

import { Key } from '@/app/_components/key'
import { signOutHere } from '@/app/_components/sign-out'

/** Leaves the first run where it stands; at the next sign-in it goes on from there. */
export function LeaveKey() {
  return (
    <Key tone="quiet" className="px-3" onPress={() => void signOutHere()}>
      Leave for now
    </Key>
  )
}
