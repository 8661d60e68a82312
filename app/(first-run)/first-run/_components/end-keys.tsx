'use client'

import { Key, KeyLink } from '@/app/_components/key'
import { endFirstRunAction, lookWithDemoAction } from '@/app/(first-run)/first-run/actions'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'

/** The ways out of the first run. */
export function EndKeys({ canAddTree }: { canAddTree: boolean }) {
  const tree = useKeptForm(() => endFirstRunAction('tree'))
  const floor = useKeptForm(() => endFirstRunAction('floor'))
  const demo = useKeptForm(lookWithDemoAction)
  const isBusy = tree.isPending || floor.isPending || demo.isPending
  return (
    <>
      <div className="end-keys">
        {canAddTree && (
          <form {...tree.formProps}>
            <Key type="submit" tone="go" size={64} icon="plus" isOff={isBusy}>
              Add the first tree
            </Key>
          </form>
        )}
        <form {...floor.formProps}>
          <Key type="submit" tone={canAddTree ? 'plain' : 'go'} size={64} isOff={isBusy}>
            To the empty floor
          </Key>
        </form>
        <form {...demo.formProps}>
          <Key type="submit" size={64} isOff={isBusy}>
            {demo.isPending ? 'Laying demo data: up to a minute' : 'Look at it with demo data first'}
          </Key>
        </form>
      </div>
      {[tree, floor, demo].map(({ state }, index) => (
        <FormMessage key={index} state={state} />
      ))}
      <div className="step-foot">
        <KeyLink href="/first-run?step=people" size={56}>
          Back
        </KeyLink>
      </div>
    </>
  )
}
