'use client'

import { useRouter } from 'next/navigation'
import { startTransition } from 'react'
import { endStepAction } from '@/app/(first-run)/first-run/actions'
import { stepAfter, type FirstRunStep } from '@/lib/foundry/first-run'

/** Ends a step whose own form is saved, and goes on. Where the server does not answer, the form's key does it again. */
export function useEndStep(step: FirstRunStep): () => void {
  const router = useRouter()
  return () =>
    startTransition(async () => {
      const state = await endStepAction(step).catch(() => null)
      if (state?.status === 'done') router.push(`/first-run?step=${stepAfter(step)}`)
    })
}
