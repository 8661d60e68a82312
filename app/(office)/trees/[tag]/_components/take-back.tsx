'use client'

import { useState, type FormEvent } from 'react'
import { Field } from '@/app/_components/field'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { useServerNow } from '@/app/_components/live-clock'
import { useOperation } from '@/app/(office)/_components/use-operation'
import { formatDuration } from '@/lib/format/duration'
import type { TreeDetail } from '@/lib/trees/detail-contract'
import { reasonInput } from '@/lib/trees/tree-input'

export type TakeBackProps = { takeBack: NonNullable<TreeDetail['takeBack']>; coatNumber: number; now: number }

/** Takes the newest coat back: at once by whoever logged it within ten minutes, later by a supervisor with a reason. */
export function TakeBack({ takeBack, coatNumber, now: serverNow }: TakeBackProps) {
  const [isOpen, setIsOpen] = useState(false)
  const [error, setError] = useState<string | undefined>()
  const now = useServerNow(serverNow)
  const undo = useOperation('/api/v1/dips/undo')
  const left = takeBack.until === null ? null : takeBack.until - now
  if (left !== null && left <= 0) return null

  const sendReason = (event: FormEvent<HTMLFormElement>) => {
    event.preventDefault()
    const reason = reasonInput.safeParse(new FormData(event.currentTarget).get('reason'))
    setError(reason.error?.issues[0]?.message)
    if (reason.success) undo.send({ coatIds: [takeBack.coatId], reason: reason.data })
  }

  return (
    <div className="take-back">
      <Key
        tone="quiet"
        icon="undo"
        isOff={undo.isPending}
        {...(takeBack.kind === 'own' ? {} : { 'aria-expanded': isOpen })}
        onPress={() => (takeBack.kind === 'own' ? undo.send({ coatIds: [takeBack.coatId] }) : setIsOpen(!isOpen))}
      >
        Take back coat {coatNumber}
        {left !== null && <span className="text-soot">{formatDuration(left + 59_999)} left</span>}
      </Key>
      {isOpen && (
        <form className="reason-form" noValidate onSubmit={sendReason}>
          <Field
            name="reason"
            label="Why it is taken back"
            maxLength={300}
            error={error}
            autoComplete="off"
            hint="The coat stays in the log as taken back."
          />
          <Key type="submit" tone="ink" isOff={undo.isPending}>
            Take it back
          </Key>
        </form>
      )}
      {undo.problem !== null && (
        <p className="field-error" role="alert">
          <Icon name="warning" />
          <span>{undo.problem}</span>
        </p>
      )}
    </div>
  )
}
