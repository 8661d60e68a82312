'use client'

import { Field, SelectField } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { addBathAction, changeBathAction } from '@/app/(office)/settings/baths/actions'
import '@/app/(office)/settings/settings.css'
import { BATH_KINDS, type BathInput, type BathKind } from '@/lib/coats/bath-input'

const KIND_WORDS: Record<BathKind, string> = { face: 'Face coats', backup: 'Backup, core fill and seal coats' }

export type BathFormProps = {
  /** A known bath; a new one without. */
  bath?: { id: string; name: string; kind: BathKind }
  /** What a new one most likely is. */
  proposal?: BathInput
  onDone?: () => void
}

/** The form of a slurry bath. It stands alone on any page. */
export function BathForm({ bath, proposal, onDone }: BathFormProps) {
  const form = useKeptForm(bath ? changeBathAction.bind(null, bath.id) : addBathAction, onDone)
  return (
    <form {...form.formProps} className="settings-form">
      <div className="form-grid">
        <Field
          name="name"
          label="Name"
          defaultValue={bath?.name ?? proposal?.name ?? ''}
          error={form.errorOf('name')}
          hint="As it is called over the room."
          maxLength={40}
          autoComplete="off"
        />
        <SelectField name="kind" label="What it is for" defaultValue={bath?.kind ?? proposal?.kind ?? ''} error={form.errorOf('kind')}>
          <option value="" disabled>
            Choose what it is for
          </option>
          {BATH_KINDS.map((kind) => (
            <option key={kind} value={kind}>
              {KIND_WORDS[kind]}
            </option>
          ))}
        </SelectField>
      </div>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          {bath ? 'Save the bath' : 'Add the bath'}
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
