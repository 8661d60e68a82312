'use client'

import { useEffect, useRef, useState, type ReactNode } from 'react'
import type { KeySize, KeyTone } from '@/app/_components/key'

const HOLD_MS = 900
const SECOND_PRESS_MS = 3000

export type HoldKeyProps = {
  children: ReactNode
  /** What stands on the key between a short press and the second one. */
  againWords?: string
  onConfirm: () => void
  size?: KeySize
  tone?: KeyTone
  isOff?: boolean
  className?: string
}

/**
 * A key for what cannot be undone on the floor: hold it 900 ms while it fills; letting go calls it off.
 * Keyboard: hold Enter or Space. For those who cannot hold: a second press within 3 s.
 */
export function HoldKey({
  children,
  againWords = 'Press again to confirm',
  onConfirm,
  size = 64,
  tone = 'plain',
  isOff = false,
  className = '',
}: HoldKeyProps) {
  const [isHolding, setIsHolding] = useState(false)
  const [isArmed, setIsArmed] = useState(false)
  const holdTimer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined)
  const armTimer = useRef<ReturnType<typeof setTimeout> | undefined>(undefined)
  const hasConfirmed = useRef(false)

  useEffect(
    () => () => {
      clearTimeout(holdTimer.current)
      clearTimeout(armTimer.current)
    },
    [],
  )

  const confirm = () => {
    hasConfirmed.current = true
    clearTimeout(holdTimer.current)
    clearTimeout(armTimer.current)
    setIsHolding(false)
    setIsArmed(false)
    onConfirm()
  }
  const start = () => {
    if (isOff || isHolding) return
    hasConfirmed.current = false
    setIsHolding(true)
    clearTimeout(holdTimer.current)
    holdTimer.current = setTimeout(confirm, HOLD_MS)
  }
  const stop = () => {
    clearTimeout(holdTimer.current)
    setIsHolding(false)
  }
  /** A short press: the first arms the key, the second within 3 s confirms. */
  const tap = () => {
    if (isOff || hasConfirmed.current) return
    if (isArmed) {
      confirm()
      return
    }
    setIsArmed(true)
    clearTimeout(armTimer.current)
    armTimer.current = setTimeout(() => setIsArmed(false), SECOND_PRESS_MS)
  }

  return (
    <button
      type="button"
      className={['key', 'key-hold', size === 44 ? '' : `key-${size}`, isOff ? 'key-off' : tone === 'plain' ? '' : `key-${tone}`, className]
        .filter(Boolean)
        .join(' ')}
      aria-disabled={isOff || undefined}
      data-holding={isHolding}
      onPointerDown={(event) => {
        if (event.isPrimary && event.button === 0) start()
      }}
      onPointerUp={stop}
      onPointerLeave={stop}
      onPointerCancel={stop}
      onContextMenu={(event) => event.preventDefault()}
      onKeyDown={(event) => {
        if (event.key !== 'Enter' && event.key !== ' ') return
        event.preventDefault()
        if (!event.repeat) start()
      }}
      onKeyUp={(event) => {
        if (event.key !== 'Enter' && event.key !== ' ') return
        event.preventDefault()
        stop()
        tap()
      }}
      onBlur={stop}
      onClick={(event) => {
        // A finger's short press only calls the hold off; a switch or a reader clicks without a pointer.
        if (event.detail === 0) tap()
      }}
    >
      <span className="hold-fill" aria-hidden="true" />
      <span aria-live="polite">{isArmed ? againWords : children}</span>
    </button>
  )
}
