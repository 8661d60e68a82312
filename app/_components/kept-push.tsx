'use client'

import { useKeptPush } from '@/app/_components/use-push'

/** Shows nothing: the part of the keeper that talks to the server. */
export default function KeptPush() {
  useKeptPush()
  return null
}
