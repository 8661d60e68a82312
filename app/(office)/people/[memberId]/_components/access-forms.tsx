'use client'

import { HoldKey } from '@/app/_components/hold-key'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { FirstPassword } from '@/app/(office)/people/_components/first-password'
import { disableMemberAction, enableMemberAction, renewFirstPasswordAction } from '@/app/(office)/people/actions'

/** A new first password, for a member who forgot theirs. */
export function RenewForm({ memberId }: { memberId: string }) {
  const form = useKeptForm(renewFirstPasswordAction.bind(null, memberId))
  return (
    <form {...form.formProps} className="grid gap-4">
      <div>
        <Key type="submit" size={56} isOff={form.isPending}>
          Make a first password
        </Key>
      </div>
      <div aria-live="polite">
        <FirstPassword state={form.state} />
        {form.state.status !== 'done' && <FormMessage state={form.state} />}
      </div>
    </form>
  )
}

/** Shuts a member out, or lets them in again. */
export function AccessForm({ memberId, isDisabled }: { memberId: string; isDisabled: boolean }) {
  const disable = useKeptForm(disableMemberAction.bind(null, memberId))
  const enable = useKeptForm(enableMemberAction.bind(null, memberId))
  const form = isDisabled ? enable : disable
  return (
    <div className="grid gap-3">
      <form {...form.formProps}>
        {isDisabled ? (
          <Key type="submit" tone="go" size={56} isOff={enable.isPending}>
            Enable
          </Key>
        ) : (
          <HoldKey size={56} tone="alarm" isOff={disable.isPending} onConfirm={disable.submit}>
            Disable, hold the key
          </HoldKey>
        )}
      </form>
      {/* What the other form said is about a state that has passed. */}
      <FormMessage
        state={
          isDisabled
            ? enable.state.status === 'idle'
              ? disable.state
              : enable.state
            : enable.state.status === 'done'
              ? enable.state
              : disable.state
        }
      />
    </div>
  )
}
