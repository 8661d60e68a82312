'use client'

import { useState, type FormEvent } from 'react'
import { Field } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useOperation } from '@/app/(office)/_components/use-operation'
import { reasonInput } from '@/lib/trees/tree-input'

export type WithdrawKeyProps = { evidenceId: string; wantsReason: boolean }

/** Takes a wrong piece of evidence out of the reckoning: one's own at once, later a supervisor with a reason. */
export function WithdrawKey({ evidenceId, wantsReason }: WithdrawKeyProps) {
  const [isOpen, setIsOpen] = useState(false)
  const [error, setError] = useState<string | undefined>()
  const withdrawal = useOperation(`/api/v1/evidence/${evidenceId}/withdrawal`)
  const sendReason = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const reason = reasonInput.safeParse(new FormData(event.currentTarget).get('reason'))
    setError(reason.error?.issues[0]?.message)
    if (reason.success) withdrawal.send({ reason: reason.data })
  }
  return (
    <span className="withdraw">
      <Key
        tone="quiet"
        icon="undo"
        isOff={withdrawal.isPending}
        {...(wantsReason ? { 'aria-expanded': isOpen } : {})}
        onPress={() => (wantsReason ? setIsOpen(!isOpen) : withdrawal.send({}))}
      >
        Withdraw
      </Key>
      {isOpen && (
        <form className="reason-form" noValidate onSubmit={sendReason}>
          <Field name="reason" label="Why it is withdrawn" maxLength={300} error={error} autoComplete="off" hint="It stays in the log." />
          <Key type="submit" tone="ink" isOff={withdrawal.isPending}>
            Withdraw it
          </Key>
        </form>
      )}
      {withdrawal.problem !== null && (
        <span className="field-error" role="alert">
          <Icon name="warning" />
          <span>{withdrawal.problem}</span>
        </span>
      )}
    </span>
  )
}
