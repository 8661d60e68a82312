'use client'

import { useRouter } from 'next/navigation'
import { KeyLink, Key } from '@/app/_components/key'
import { endStepAction } from '@/app/(first-run)/first-run/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { stepAfter, type FirstRunStep } from '@/lib/foundry/first-run'

export type StepFootProps = {
  step: FirstRunStep
  back: FirstRunStep
  /** What is still missing before it goes on; null when nothing is. */
  missing: string | null
  words?: string
}

/** The way back, and the way on once nothing is missing. */
export function StepFoot({ step, back, missing, words = 'Go on' }: StepFootProps) {
  const router = useRouter()
  const form = useKeptForm(
    () => endStepAction(step),
    () => router.push(`/first-run?step=${stepAfter(step)}`),
  )
  return (
    <form {...form.formProps} className="step-foot">
      <KeyLink href={`/first-run?step=${back}`} size={56}>
        Back
      </KeyLink>
      <Key type="submit" tone="go" size={56} isOff={missing !== null || form.isPending}>
        {words}
      </Key>
      {missing !== null && <p className="text-soot">{missing}</p>}
      <FormMessage state={form.state} />
    </form>
  )
}
