'use client'

import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { MemberFields, type MemberFieldsProps } from '@/app/(office)/people/_components/member-fields'
import { editMemberAction } from '@/app/(office)/people/actions'

/** Name, e-mail and role of a known member. */
export function MemberForm({ memberId, values }: { memberId: string; values: MemberFieldsProps['values'] }) {
  const form = useKeptForm(editMemberAction.bind(null, memberId))
  return (
    <form {...form.formProps} className="grid gap-5">
      <MemberFields values={values} errorOf={form.errorOf} />
      <p className="field-hint">With another role they are signed out everywhere and sign in again.</p>
      <div className="flex flex-wrap items-center gap-3">
        <Key type="submit" tone="go" size={56} isOff={form.isPending}>
          Save
        </Key>
        <FormMessage state={form.state} isLongForm />
      </div>
    </form>
  )
}
