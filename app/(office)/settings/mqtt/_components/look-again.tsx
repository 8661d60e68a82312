'use client'

import { useRouter } from 'next/navigation'
import { useTransition } from 'react'
import { Key } from '@/app/_components/key'

/** Reads the page anew at once: for somebody who has just sent something and looks for it. */
export function LookAgain() {
  const router = useRouter()
  const [isPending, startTransition] = useTransition()
  return (
    <Key isOff={isPending} onPress={() => startTransition(() => router.refresh())}>
      Look again
    </Key>
  )
}
