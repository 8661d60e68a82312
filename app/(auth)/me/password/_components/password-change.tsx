'use client'

import { useState } from 'react'
import { Field } from '@/app/_components/field'
import { Key } from '@/app/_components/key'
import { FormMessage } from '@/app/(office)/_components/form-message'
import { useKeptForm } from '@/app/(office)/_components/use-kept-form'
import { changePasswordAction } from '@/app/(auth)/me/password/actions'

/** The password one has and the one one wants. Shown on request instead of asked for twice. */
export function PasswordChange({ email, isFirst }: { email: string; isFirst: boolean }) {
  const form = useKeptForm(changePasswordAction)
  const [isShown, setIsShown] = useState(false)
  const type = isShown ? 'text' : 'password'
  return (
    <form {...form.formProps} className="sign-in-form">
      {/* For the browser's password store: whose password it is. */}
      <input className="vh" type="text" name="username" autoComplete="username" value={email} readOnly tabIndex={-1} aria-hidden="true" />
      <Field
        name="currentPassword"
        label={isFirst ? 'The first password, once more' : 'The password you have now'}
        type={type}
        autoComplete="current-password"
        autoCapitalize="none"
        spellCheck={false}
        error={form.errorOf('currentPassword')}
      />
      <Field
        name="newPassword"
        label="Your new password"
        type={type}
        autoComplete="new-password"
        autoCapitalize="none"
        spellCheck={false}
        hint="At least 12 characters. A few words that only you would put together are easy to keep and hard to guess."
        error={form.errorOf('newPassword')}
      />
      <label className="tick">
        <input type="checkbox" checked={isShown} onChange={(event) => setIsShown(event.target.checked)} />
        <span>Show what I type</span>
      </label>
      <FormMessage state={form.state} />
      <Key type="submit" tone="go" size={64} className="text-24" isOff={form.isPending}>
        {form.isPending ? 'Saving it' : 'Save the new password'}
      </Key>
    </form>
  )
}
