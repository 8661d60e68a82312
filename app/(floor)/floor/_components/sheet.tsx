'use client'

import { useEffect, useEffectEvent, useRef, type ReactNode } from 'react'
import { Key } from '@/app/_components/key'

const IDLE_MS = 90_000

export type SheetProps = {
  label: string
  heading: ReactNode
  /** Beside the heading, at the left. */
  lead?: ReactNode
  /** Beside the heading, before the close key. */
  aside?: ReactNode
  under?: ReactNode
  tone?: 'plain' | 'warn' | 'stop'
  /** Something is not settled: the sheet stays although nobody touches it. */
  isStaying?: boolean
  /** Fill from the top instead of spreading over the height. */
  isTop?: boolean
  onClose: () => void
  children: ReactNode
  foot?: ReactNode
}

/**
 * A sheet over the tide and the rack. Not modal: the rows of the dip column stay at hand. Takes the focus when it opens, closes on
 * Escape and after 90 s without a touch.
 */
export function Sheet({
  label,
  heading,
  lead,
  aside,
  under,
  tone = 'plain',
  isStaying = false,
  isTop = false,
  onClose,
  children,
  foot,
}: SheetProps) {
  const title = useRef<HTMLHeadingElement>(null)
  const close = useEffectEvent(onClose)

  useEffect(() => {
    title.current?.focus({ preventScroll: true })
  }, [])

  useEffect(() => {
    if (isStaying) return undefined
    let timer = setTimeout(() => close(), IDLE_MS)
    const wake = () => {
      clearTimeout(timer)
      timer = setTimeout(() => close(), IDLE_MS)
    }
    // Touches in the dip column count too: they add trees to the run.
    document.addEventListener('pointerdown', wake)
    document.addEventListener('keydown', wake)
    return () => {
      clearTimeout(timer)
      document.removeEventListener('pointerdown', wake)
      document.removeEventListener('keydown', wake)
    }
  }, [isStaying])

  useEffect(() => {
    const onKey = (event: KeyboardEvent) => {
      if (event.key === 'Escape') close()
    }
    document.addEventListener('keydown', onKey)
    return () => document.removeEventListener('keydown', onKey)
  }, [])

  return (
    <dialog open className={`sheet ${tone === 'plain' ? '' : `sheet-${tone}`}`} aria-label={label}>
      <div className="sheet-head">
        {lead}
        <div className="sheet-title">
          <h2 ref={title} tabIndex={-1} className={typeof heading === 'string' && heading.length > 34 ? 'is-long' : undefined}>
            {heading}
          </h2>
          {under && <p>{under}</p>}
        </div>
        {aside}
        <Key size={64} icon="cross" className="sheet-close" onPress={onClose} aria-label="Close">
          {null}
        </Key>
      </div>
      <div className={`sheet-body ${isTop ? 'sheet-body-top' : ''}`}>{children}</div>
      {foot && <div className="sheet-foot">{foot}</div>}
    </dialog>
  )
}
