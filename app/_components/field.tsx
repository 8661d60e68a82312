'use client'

import { useId, type ComponentProps, type ReactNode } from 'react'
import { Icon } from '@/app/_components/icons'

export type FieldProps = {
  label: ReactNode
  /** The sentence about what is wrong; it stands beside the field and is read with it. */
  error?: string | undefined
  hint?: ReactNode
  /** Set after the input: '°C'. */
  unit?: string
  /** Floor fields are taller. */
  size?: 48 | 64
  className?: string
} & Omit<ComponentProps<'input'>, 'size' | 'className'>

/** Label, input and the sentence about an error, tied together. */
export function Field({ label, error, hint, unit, size = 48, className = '', id, ...input }: FieldProps) {
  const ownId = useId()
  const fieldId = id ?? ownId
  const hintId = `${fieldId}-hint`
  const errorId = `${fieldId}-error`
  const describedBy = [hint ? hintId : '', error ? errorId : ''].filter(Boolean).join(' ') || undefined
  return (
    <div className={`field ${size === 64 ? 'field-64' : ''} ${className}`}>
      <label htmlFor={fieldId}>{label}</label>
      <span className="input-unit">
        <input {...input} id={fieldId} className="input" aria-invalid={error ? true : undefined} aria-describedby={describedBy} />
        {unit && <span className="num whitespace-nowrap">{unit}</span>}
      </span>
      {hint && (
        <p className="field-hint" id={hintId}>
          {hint}
        </p>
      )}
      <FieldError id={errorId} error={error} />
    </div>
  )
}

/** The error sentence of a field, with its mark. Also for fields that are not inputs. */
export function FieldError({ id, error }: { id: string; error: string | undefined }) {
  if (!error) return null
  return (
    <p className="field-error" id={id} role="alert">
      <Icon name="warning" />
      <span>{error}</span>
    </p>
  )
}

export type SelectFieldProps = {
  label: ReactNode
  error?: string | undefined
  hint?: ReactNode
  size?: 48 | 64
  className?: string
  children: ReactNode
} & Omit<ComponentProps<'select'>, 'size' | 'className' | 'children'>

/** The same with a list to choose from. */
export function SelectField({ label, error, hint, size = 48, className = '', id, children, ...select }: SelectFieldProps) {
  const ownId = useId()
  const fieldId = id ?? ownId
  const hintId = `${fieldId}-hint`
  const errorId = `${fieldId}-error`
  const describedBy = [hint ? hintId : '', error ? errorId : ''].filter(Boolean).join(' ') || undefined
  return (
    <div className={`field ${size === 64 ? 'field-64' : ''} ${className}`}>
      <label htmlFor={fieldId}>{label}</label>
      <select {...select} id={fieldId} className="input" aria-invalid={error ? true : undefined} aria-describedby={describedBy}>
        {children}
      </select>
      {hint && (
        <p className="field-hint" id={hintId}>
          {hint}
        </p>
      )}
      <FieldError id={errorId} error={error} />
    </div>
  )
}
