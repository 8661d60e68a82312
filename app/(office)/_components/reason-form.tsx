'use client'

import { useEffect, useRef } from 'react'
import { Field } from '@/app/_components/field'
import { HoldKey } from '@/app/_components/hold-key'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import type { FormState } from '@/lib/server/form-state'

export type ReasonFormProps = {
  action: (previous: FormState, form: FormData) => Promise<FormState>
  label: string
  hint?: string
  confirm: string
  /** What cannot be undone is held, not pressed. */
  isHeldKey?: boolean
  /** Brings the form into view and puts the cursor in it: it was opened by a key elsewhere. */
  isOpenedByKey?: boolean
  onDone?: () => void
}

/** An act that wants a reason. */
export function ReasonForm({ action, label, hint, confirm, isHeldKey = false, isOpenedByKey = false, onDone }: ReasonFormProps) {
  const form = useKeptForm(action, onDone)
  const box = useRef<HTMLDivElement>(null)
  useEffect(() => {
    if (!isOpenedByKey) return
    box.current?.scrollIntoView({ block: 'center' })
    box.current?.querySelector('input')?.focus({ preventScroll: true })
  }, [isOpenedByKey])
  return (
    <div ref={box}>
      <form {...form.formProps} className="reason-form">
        <Field name="reason" label={label} hint={hint} maxLength={300} autoComplete="off" error={form.errorOf('reason')} />
        {isHeldKey ? (
          <HoldKey size={44} tone="alarm" isOff={form.isPending} onConfirm={form.submit}>
            {confirm}
          </HoldKey>
        ) : (
          <Key type="submit" tone="ink" isOff={form.isPending}>
            {confirm}
          </Key>
        )}
      </form>
      <FormMessage state={form.state} />
    </div>
  )
}
