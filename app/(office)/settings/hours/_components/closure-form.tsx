'use client'

import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { addClosureAction, changeClosureAction } from '@/app/(office)/settings/hours/actions'
import '@/app/(office)/settings/settings.css'

export type ClosureFormProps = {
  /** Known closed days; new ones without. */
  closure?: { id: string; name: string; firstDay: string; lastDay: string }
  onDone?: () => void
}

/** The form of closed days. It stands alone on any page. */
export function ClosureForm({ closure, onDone }: ClosureFormProps) {
  const form = useKeptForm(closure ? changeClosureAction.bind(null, closure.id) : addClosureAction, onDone)
  return (
    <form {...form.formProps} className="settings-form">
      <div className="closure-fields">
        <Field
          name="name"
          label="Name"
          defaultValue={closure?.name ?? ''}
          error={form.errorOf('name')}
          hint="Christmas, stocktaking, the fair."
          maxLength={60}
          autoComplete="off"
        />
        <Field
          name="firstDay"
          type="date"
          label="First closed day"
          defaultValue={closure?.firstDay ?? ''}
          error={form.errorOf('firstDay')}
        />
        <Field
          name="lastDay"
          type="date"
          label="Last closed day"
          defaultValue={closure?.lastDay ?? ''}
          error={form.errorOf('lastDay')}
          hint="Empty for one day."
        />
      </div>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {closure ? 'Save the closed days' : 'Add the closed days'}
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
