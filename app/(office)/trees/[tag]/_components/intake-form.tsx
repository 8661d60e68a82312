'use client'

import { FieldError } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { intakeAction } from '@/app/(office)/trees/[tag]/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import type { TreeDetail } from '@/lib/trees/detail-contract'
import { WAX_SURFACES } from '@/lib/trees/tree-input'

const TICKS = [
  { name: 'isWaxAtRoomTemp', word: 'At room temperature', why: 'a cold wax grows under coat 1' },
  { name: 'isCupFirm', word: 'Cup and handle firm', why: 'the tree hangs by them' },
  { name: 'areVentsAndCorePinsIn', word: 'Vents and core pins in', why: 'they cannot go in later' },
] as const

/** Before coat 1: passed only as a whole; what is not ticked stays open and stays ticked. */
export function IntakeForm({ treeId, intake }: { treeId: string; intake: TreeDetail['intake'] }) {
  const form = useKeptForm(intakeAction.bind(null, treeId))
  return (
    <form {...form.formProps} className="grid gap-3">
      <fieldset className="tick-set">
        <legend className="label">Wax surface</legend>
        <span className="flex flex-wrap gap-2">
          {WAX_SURFACES.map((surface) => (
            <label key={surface} className="tick">
              <input type="radio" name="waxSurface" value={surface} defaultChecked={intake.waxSurface === surface} />
              <span>{surface === 'washed' ? 'Washed' : 'Etched'}</span>
            </label>
          ))}
        </span>
        <FieldError id={`intake-${treeId}-surface`} error={form.errorOf('waxSurface')} />
      </fieldset>
      {TICKS.map(({ name, word, why }) => (
        <label key={name} className="tick">
          <input type="checkbox" name={name} defaultChecked={intake[name]} />
          <span>
            {word} <span className="text-soot">({why})</span>
          </span>
        </label>
      ))}
      <span className="flex flex-wrap items-center gap-3">
        <Key type="submit" tone="go" isOff={form.isPending}>
          Pass intake
        </Key>
        <FormMessage state={form.state} />
      </span>
    </form>
  )
}
