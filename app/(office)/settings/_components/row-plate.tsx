'use client'

import { useState, type ReactNode } from 'react'
import { DemoMark } from '@/app/_components/demo-mark'
import { Key } from '@/app/_components/key'

export type RowPlateProps = {
  title: string
  /** Demo data in a foundry that is not the demo itself. */
  isDemo?: boolean
  /** Beside the title. */
  line?: ReactNode
  /** What is known of it. */
  children: ReactNode
  /** The form that 'Change' opens; a row without stands. */
  form?: ReactNode
  /** What the key says that opens the form. */
  verb?: string
  /** Other keys of the row. */
  keys?: ReactNode
}

/** One row of the settings: what is known of it, its keys, and its form where somebody changes it. */
export function RowPlate({ title, isDemo = false, line, children, form, verb = 'Change', keys }: RowPlateProps) {
  const [isOpen, setIsOpen] = useState(false)
  return (
    <li className="plate settings-row">
      <header>
        <h2>
          {title} {isDemo && <DemoMark />}
        </h2>
        {line !== undefined && <p>{line}</p>}
      </header>
      <div className="plate-body">
        <div className="settings-row-head">
          <div className="settings-row-facts">{children}</div>
          <div className="settings-row-keys">
            {form !== undefined && (
              <Key aria-label={`${verb} ${title}`} aria-expanded={isOpen} onPress={() => setIsOpen(!isOpen)}>
                {isOpen ? 'Close the form' : verb}
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
