'use client'

import { useState, type ReactNode } from 'react'
import { Key } from '@/app/_components/key'

export type RowPlateProps = {
  title: string
  /** Beside the title. */
  line?: ReactNode
  /** What is known of it. */
  children: ReactNode
  /** The form that 'Change' opens; a row without stands. */
  form?: ReactNode
  /** Other keys of the row. */
  keys?: ReactNode
}

/** One row of the settings: what is known of it, its keys, and its form where somebody changes it. */
export function RowPlate({ title, line, children, form, keys }: RowPlateProps) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <li className="plate settings-row">
      <header>
        <h2>{title}</h2>
        {line !== undefined && <p>{line}</p>}
      </header>
      <div className="plate-body">
        <div className="settings-row-head">
          <div className="settings-row-facts">{children}</div>
          <div className="settings-row-keys">
            {form !== undefined && (
              <Key aria-label={`Change ${title}`} aria-expanded={isOpen} onPress={() => setIsOpen(!isOpen)}>
                {isOpen ? 'Close the form' : 'Change'}
              </Key>
            )}
            {keys}
          </div>
        </div>
        {isOpen && <div className="settings-row-form">{form}</div>}
      </div>
    </li>
  )
}
