'use client'

import { useCallback, useRef, type MouseEvent as ReactMouseEvent, type PointerEvent } from 'react'

/** A wet glove bounces: a second touch of the same spot within this time is the same touch. */
const PRESS_DEAF_MS = 400
/** How far a bounce lands from the first touch, px. Far wider than a finger trembles, narrower than two keys. */
const PRESS_SPOT_PX = 56

let last = { at: Number.NEGATIVE_INFINITY, x: 0, y: 0 }
let isGhostGuardOn = false

/** True when this touch is the bounce of the one before, whichever element lies under it by now. */
function isBounce(at: number, x: number, y: number): boolean {
  return at - last.at < PRESS_DEAF_MS && Math.abs(x - last.x) < PRESS_SPOT_PX && Math.abs(y - last.y) < PRESS_SPOT_PX
}

/**
 * After a touch the browser sends a mouse press and a click to whatever lies there by then. Since keys act when the finger lifts,
 * a sheet that has just opened would be clicked, or lose its focus, by the very touch that opened it.
 */
function swallow(event: MouseEvent): void {
  if (event.detail === 0 || !isBounce(performance.now(), event.clientX, event.clientY)) return
  event.preventDefault()
  event.stopPropagation()
}

function guardAgainstGhosts(): void {
  if (isGhostGuardOn) return
  isGhostGuardOn = true
  document.addEventListener('click', swallow, { capture: true })
  document.addEventListener('mousedown', swallow, { capture: true })
}

export type PressHandlers = {
  onPointerDown: (event: PointerEvent<HTMLElement>) => void
  onPointerUp: (event: PointerEvent<HTMLElement>) => void
  onPointerCancel: () => void
  onClick: (event: ReactMouseEvent<HTMLElement>) => void
}

/**
 * Handlers of a key for gloved hands: acts when the finger lifts inside the key, also when it slid there; takes one finger at
 * a time; a second touch of the spot within 400 ms does nothing. Keyboards, switches and readers come in as plain clicks.
 *
 * @param deafMs shorter for a stepper that is meant to be tapped fast.
 */
export function usePress(act: (() => void) | undefined, deafMs: number = PRESS_DEAF_MS): PressHandlers {
  const finger = useRef<number | null>(null)
  const own = useRef(Number.NEGATIVE_INFINITY)

  const fire = useCallback(
    (x: number, y: number) => {
      const now = performance.now()
      const isOwnSpot = now - own.current < deafMs
      const isOtherBounce = own.current !== last.at && isBounce(now, x, y)
      if (isOwnSpot || isOtherBounce) return
      own.current = now
      last = { at: now, x, y }
      act?.()
    },
    [act, deafMs],
  )

  return {
    onPointerDown: (event) => {
      guardAgainstGhosts()
      finger.current = event.isPrimary && event.button === 0 ? event.pointerId : null
    },
    onPointerUp: (event) => {
      if (finger.current !== event.pointerId) return
      finger.current = null
      const box = event.currentTarget.getBoundingClientRect()
      const isInside = event.clientX >= box.left && event.clientX <= box.right && event.clientY >= box.top && event.clientY <= box.bottom
      if (!isInside) return
      event.currentTarget.focus({ preventScroll: true })
      fire(event.clientX, event.clientY)
    },
    onPointerCancel: () => {
      finger.current = null
    },
    onClick: (event) => {
      // Pointer touches were handled when the finger lifted; the capture guard swallows their clicks. What is left is a keyboard,
      // a switch or a reader.
      const box = event.currentTarget.getBoundingClientRect()
      fire(event.clientX || box.left + box.width / 2, event.clientY || box.top + box.height / 2)
    },
  }
}
