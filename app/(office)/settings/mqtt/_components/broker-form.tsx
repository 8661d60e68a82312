'use client'

import { useState } from 'react'
import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { saveBrokerAction } from '@/app/(office)/settings/mqtt/actions'

export type BrokerFormProps = { broker: { isOn: boolean; address: string; userName: string; hasPassword: boolean } }

/** The broker's address and the user that Kilnward is to it. The stored password is never shown. */
export function BrokerForm({ broker }: BrokerFormProps) {
  // Once it is saved nothing of it stays in the page.
  const [savedCount, setSavedCount] = useState(0)
  const form = useKeptForm(saveBrokerAction, () => setSavedCount((saved) => saved + 1))
  return (
    <form {...form.formProps} className="settings-form">
      <div className="form-grid-3">
        <Field
          name="address"
          label="Address"
          defaultValue={broker.address}
          placeholder="mqtt://192.168.1.20:1883"
          error={form.errorOf('address')}
          hint="mqtts:// where the broker has a certificate. With mqtt:// the password goes over the wire in the clear: only on a network of your own."
          autoComplete="off"
          autoCapitalize="none"
          spellCheck={false}
          inputMode="url"
        />
        <Field
          name="userName"
          label="User name"
          defaultValue={broker.userName}
          error={form.errorOf('userName')}
          hint="Empty where the broker lets everybody in."
          maxLength={200}
          autoComplete="off"
          autoCapitalize="none"
          spellCheck={false}
        />
        <Field
          key={savedCount}
          name="password"
          type="password"
          label="Password"
          error={form.errorOf('password')}
          hint={
            broker.hasPassword ? 'One is stored, sealed, and shown nowhere. Empty: it stays.' : 'It is stored sealed, and shown nowhere.'
          }
          maxLength={500}
          autoComplete="new-password"
        />
      </div>
      <label className="tick">
        <input type="checkbox" name="isOn" defaultChecked={broker.isOn} />
        <span>Listen to this broker</span>
      </label>
      <div className="form-foot">
        <Key type="submit" tone="go" isOff={form.isPending}>
          Save the broker
        </Key>
        <FormMessage state={form.state} />
      </div>
    </form>
  )
}
