'use client'

import { useId } from 'react'
import { Field, FieldError } from '@/app/_components/field'
import { ROLE_WORDS } from '@/lib/members/role-words'
import { ROLE_ORDER, type Role } from '@/lib/members/roles'

export type MemberFieldsProps = {
  values: { name: string; email: string; role: Role | '' }
  errorOf: (field: string) => string | undefined
}

/** Who somebody is and what they may do: for a new member and for a known one. */
export function MemberFields({ values, errorOf }: MemberFieldsProps) {
  const errorId = useId()
  const roleError = errorOf('role')
  return (
    <div className="grid gap-5">
      <div className="form-grid">
        <Field name="name" label="Name" defaultValue={values.name} maxLength={80} autoComplete="off" error={errorOf('name')} />
        <Field
          name="email"
          label="E-mail"
          hint="They sign in with it. Nothing is sent to it."
          defaultValue={values.email}
          inputMode="email"
          autoComplete="off"
          autoCapitalize="none"
          spellCheck={false}
          maxLength={254}
          error={errorOf('email')}
        />
      </div>
      <fieldset
        className="role-choice"
        role="radiogroup"
        tabIndex={-1}
        aria-invalid={roleError ? true : undefined}
        aria-describedby={roleError ? errorId : undefined}
      >
        <legend className="label">What they may do</legend>
        {ROLE_ORDER.map((role) => (
          <label key={role} className="role-line">
            <input type="radio" name="role" value={role} defaultChecked={values.role === role} />
            <span>
              <b>{role}</b>
              {ROLE_WORDS[role]}
            </span>
          </label>
        ))}
        <FieldError id={errorId} error={roleError} />
      </fieldset>
    </div>
  )
}
