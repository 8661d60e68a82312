'use client'

import { useId, type ReactNode } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { COAT_KINDS, GUARDS, STUCCOS } from '@/lib/coats/vocabulary'
import type { BathChoice } from '@/lib/queries/recipe-detail'
import type { CoatValues } from '@/lib/recipes/recipe-form-values'

/** Names of the fields as the server complains about them. */
const COMPLAINTS = {
  kind: 'kind',
  bathId: 'bathId',
  stucco: 'stucco',
  needReferenceHours: 'needReferenceHours',
  targetPct: 'moistureTarget',
  guard: 'guard',
  drainSeconds: 'drainSeconds',
  longestWaitHours: 'longestWaitHours',
  isPrewet: 'isPrewet',
  readAloud: 'readAloud',
} as const satisfies Record<keyof CoatValues, string>

const COLUMNS = [
  ['kind', 'Kind'],
  ['bathId', 'Bath'],
  ['stucco', 'Stucco'],
  ['needReferenceHours', 'Need, h'],
  ['targetPct', 'Water left, %'],
  ['guard', 'Guard'],
  ['drainSeconds', 'Drain, s'],
  ['longestWaitHours', 'Longest wait, h'],
  ['isPrewet', 'Prewet'],
] as const satisfies readonly (readonly [keyof CoatValues, string])[]

const wordOptions = (words: readonly string[]) =>
  words.map((word) => (
    <option key={word} value={word}>
      {word}
    </option>
  ))

export function CoatFieldsHead() {
  return (
    <div className="coat-fields-head" aria-hidden="true">
      <span>Coat</span>
      {COLUMNS.map(([key, word]) => (
        <span key={key}>{word}</span>
      ))}
    </div>
  )
}

export type CoatFieldsProps = {
  index: number
  count: number
  coat: CoatValues
  baths: readonly BathChoice[]
  /** Our starting value for its need. */
  start: string | null
  mark: ReactNode
  errorOf: (field: string) => string | undefined
  onChange: (changes: Partial<CoatValues>) => void
  onMove: (by: -1 | 1) => void
  onRemove: () => void
}

/** One coat of the form: its fields in a row, what is read aloud under them, its keys at the end. */
export function CoatFields({ index, count, coat, baths, start, mark, errorOf, onChange, onMove, onRemove }: CoatFieldsProps) {
  const id = useId()
  const number = index + 1
  const complaint = (field: keyof CoatValues) => errorOf(COMPLAINTS[field])
  const fieldProps = (field: keyof CoatValues) => ({
    id: `${id}-${field}`,
    name: `coats.${index}.${COMPLAINTS[field]}`,
    'aria-invalid': complaint(field) === undefined ? undefined : (true as const),
    'aria-describedby': complaint(field) === undefined ? undefined : `${id}-${field}-error`,
  })
  const choice = (field: 'kind' | 'bathId' | 'stucco' | 'guard', options: ReactNode) => (
    <select
      {...fieldProps(field)}
      className="input"
      value={coat[field]}
      onChange={(event) => onChange({ [field]: event.currentTarget.value })}
    >
      <option value="" disabled>
        Choose
      </option>
      {options}
    </select>
  )
  const figure = (field: 'needReferenceHours' | 'targetPct' | 'drainSeconds' | 'longestWaitHours') => (
    <input
      {...fieldProps(field)}
      className="input"
      inputMode="decimal"
      autoComplete="off"
      maxLength={8}
      value={coat[field]}
      onChange={(event) => onChange({ [field]: event.currentTarget.value })}
    />
  )
  const inputs: Record<(typeof COLUMNS)[number][0], ReactNode> = {
    kind: choice('kind', wordOptions(COAT_KINDS)),
    bathId: choice(
      'bathId',
      baths
        .filter((bath) => !bath.isRetired || bath.id === coat.bathId)
        .map((bath) => (
          <option key={bath.id} value={bath.id}>
            {bath.isRetired ? `${bath.name} (retired)` : bath.name}
          </option>
        )),
    ),
    stucco: choice('stucco', wordOptions(STUCCOS)),
    needReferenceHours: (
      <>
        {figure('needReferenceHours')}
        {start !== null && start !== coat.needReferenceHours.replace(',', '.') && <span className="coat-start">start {start}</span>}
      </>
    ),
    targetPct: figure('targetPct'),
    guard: choice('guard', wordOptions(GUARDS)),
    drainSeconds: figure('drainSeconds'),
    longestWaitHours: figure('longestWaitHours'),
    isPrewet: (
      <span className="tick">
        <input
          {...fieldProps('isPrewet')}
          type="checkbox"
          checked={coat.isPrewet}
          onChange={(event) => onChange({ isPrewet: event.currentTarget.checked })}
        />
      </span>
    ),
  }
  const complaints = [...COLUMNS.map(([key]) => key), 'readAloud' as const].filter((field) => complaint(field) !== undefined)
  return (
    <fieldset className="coat-fields" data-coat={number}>
      <legend className="vh">Coat {number}</legend>
      <div className="coat-number">
        <span className="num" aria-hidden="true">
          {number}
        </span>
        {mark}
      </div>
      {COLUMNS.map(([key, word]) => (
        <div key={key} className={`coat-field coat-field-${key}`}>
          <label htmlFor={`${id}-${key}`}>{word}</label>
          {inputs[key]}
        </div>
      ))}
      <div className="coat-keys">
        <Key tone="quiet" icon="up" aria-label={`Move coat ${number} up`} isOff={index === 0} onPress={() => onMove(-1)}>
          <span className="vh">Up</span>
        </Key>
        <Key tone="quiet" icon="down" aria-label={`Move coat ${number} down`} isOff={index === count - 1} onPress={() => onMove(1)}>
          <span className="vh">Down</span>
        </Key>
        <Key tone="quiet" icon="minus" aria-label={`Take coat ${number} out`} onPress={onRemove}>
          <span className="vh">Take out</span>
        </Key>
      </div>
      <div className="coat-field coat-field-readAloud">
        <label htmlFor={`${id}-readAloud`}>Read aloud</label>
        <input
          {...fieldProps('readAloud')}
          className="input"
          maxLength={120}
          autoComplete="off"
          value={coat.readAloud}
          onChange={(event) => onChange({ readAloud: event.currentTarget.value })}
        />
      </div>
      {complaints.length > 0 && (
        <div className="coat-complaints" role="alert">
          {complaints.map((field) => (
            <p key={field} className="field-error" id={`${id}-${field}-error`}>
              <Icon name="warning" />
              <span>{complaint(field)}</span>
            </p>
          ))}
        </div>
      )}
    </fieldset>
  )
}
