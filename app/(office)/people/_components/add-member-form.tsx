'use client'

import { useRef } from 'react'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { FirstPassword } from '@/app/(office)/people/_components/first-password'
import { MemberFields } from '@/app/(office)/people/_components/member-fields'
import { addMemberAction } from '@/app/(office)/people/actions'

/** Adds a member; their first password stands under the form until the next one is added or the page is left. */
export function AddMemberForm() {
  const said = useRef<HTMLDivElement>(null)
  const form = useKeptForm(addMemberAction, () => {
    said.current?.closest('form')?.reset()
    said.current?.focus()
  })
  return (
    <form {...form.formProps} className="grid gap-5">
      <MemberFields values={{ name: '', email: '', role: '' }} errorOf={form.errorOf} />
      <div>
        <Key type="submit" tone="go" icon="plus" size={56} isOff={form.isPending}>
          Add the member
        </Key>
      </div>
      <div ref={said} tabIndex={-1} aria-live="polite">
        <FirstPassword state={form.state} />
        {form.state.status !== 'done' && <FormMessage state={form.state} isLongForm />}
      </div>
    </form>
  )
}
