'use client'

import { useEffect, useRef, useState, type ReactNode } from 'react'
import { Icon } from '@/app/_components/icons'
import { Key } from '@/app/_components/key'
import { Plate } from '@/app/_components/plate'
import { EmptyState } from '@/app/(office)/_components/empty-state'

export type AddPlateProps = {
  /** On the key: 'Add a place'. */
  words: string
  /** What stands there while the list is empty; null once it is not. */
  empty: { title: string; text: string } | null
  /** The form; `onDone` is called once it has added one. */
  renderForm: (onDone: () => void) => ReactNode
}

/** The key that adds the first or another row, and its form. After each one the form closes and the list shows it. */
export function AddPlate({ words, empty, renderForm }: AddPlateProps) {
  const [isOpen, setIsOpen] = useState(false)
  const [isAdded, setIsAdded] = useState(false)
  const ref = useRef<HTMLButtonElement>(null)
  // The form that had the focus is gone.
  useEffect(() => {
    if (isAdded) ref.current?.focus()
  }, [isAdded])
  const key = (
    <Key
      ref={ref}
      tone={isOpen ? 'quiet' : 'go'}
      icon={isOpen ? 'minus' : 'plus'}
      aria-expanded={isOpen}
      onPress={() => {
        setIsAdded(false)
        setIsOpen(!isOpen)
      }}
    >
      {isOpen ? 'Close the form' : words}
    </Key>
  )
  return (
    <div className="add-plate">
      {empty !== null && !isOpen ? (
        <EmptyState title={empty.title} action={key}>
          {empty.text}
        </EmptyState>
      ) : (
        <span className="add-key">
          {key}
          <output className="form-done" aria-live="polite">
            {isAdded && (
              <>
                <Icon name="check" />
                Added.
              </>
            )}
          </output>
        </span>
      )}
      {isOpen && (
        <Plate title={words}>
          {renderForm(() => {
            setIsOpen(false)
            setIsAdded(true)
          })}
        </Plate>
      )}
    </div>
  )
}
