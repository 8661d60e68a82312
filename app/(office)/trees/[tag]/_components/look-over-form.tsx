'use client'

import { useId } from 'react'
import { FieldError } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { lookOverAction } from '@/app/(office)/trees/[tag]/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'

/** Notes a look-over. A person may always look; while the shell is wet the form says what the look is worth. */
export function LookOverForm({ treeId, warning, isDue }: { treeId: string; warning: string | null; isDue: boolean }) {
  const form = useKeptForm(lookOverAction.bind(null, treeId))
  const id = useId()
  const error = form.errorOf('note')
  return (
    <form {...form.formProps} className="grid gap-2">
      {warning !== null && (
        <p className="flex gap-2 text-15 font-semibold text-ochre-ink">
          <Icon name="warning" />
          <span>{warning}</span>
        </p>
      )}
      <div className="field">
        <label htmlFor={id}>What you saw</label>
        <textarea
          id={id}
          className="input"
          name="note"
          rows={2}
          maxLength={300}
          placeholder="Nothing to note, or: hairline at the lower rail, patched."
          aria-invalid={error ? true : undefined}
          aria-describedby={error ? `${id}-error` : undefined}
        />
        <FieldError id={`${id}-error`} error={error} />
      </div>
      <span className="flex flex-wrap items-center gap-3">
        <Key type="submit" tone={isDue ? 'go' : 'plain'} icon="check" isOff={form.isPending}>
          Looked over
        </Key>
        <FormMessage state={form.state} />
      </span>
    </form>
  )
}
