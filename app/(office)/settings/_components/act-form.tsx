'use client'

import { HoldKey } from '@/app/_components/hold-key'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import type { FormState } from '@/lib/server/form-state'

export type ActFormProps = {
  action: () => Promise<FormState>
  children: string
  /** For a reader, where several keys have the same words. */
  label?: string
  /** What cannot be undone is held, not pressed. */
  isHeldKey?: boolean
}

/** One key that does one thing to one row; a refusal stands under it. */
export function ActForm({ action, children, label, isHeldKey = false }: ActFormProps) {
  const form = useKeptForm(action)
  return (
    <form {...form.formProps} className="act-form" aria-label={label}>
      {isHeldKey ? (
        <HoldKey size={44} isOff={form.isPending} onConfirm={form.submit}>
          {children}
        </HoldKey>
      ) : (
        <Key type="submit" tone="quiet" isOff={form.isPending} aria-label={label}>
          {children}
        </Key>
      )}
      <FormMessage state={form.state} />
    </form>
  )
}
