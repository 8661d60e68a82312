'use client'

import { useCallback, useLayoutEffect, useState, useSyncExternalStore } from 'react'

export type Size = { width: number; height: number }

function subscribe(listener: () => void): () => void {
  window.addEventListener('resize', listener)
  return () => window.removeEventListener('resize', listener)
}

/** Size of the viewport; null until the browser has taken over. */
export function useViewport(): Size | null {
  const text = useSyncExternalStore(
    subscribe,
    () => `${window.innerWidth}x${window.innerHeight}`,
    () => null,
  )
  if (text === null) return null
  const [width = 0, height = 0] = text.split('x').map(Number)
  return { width, height }
}

/** Size of an element, followed as it changes. */
export function useElementSize(fallback: Size): [(element: HTMLElement | null) => void, Size] {
  const [element, setElement] = useState<HTMLElement | null>(null)
  const [size, setSize] = useState(fallback)
  useLayoutEffect(() => {
    if (!element) return undefined
    const measure = () => {
      const { width, height } = element.getBoundingClientRect()
      if (width > 0) setSize((before) => (before.width === width && before.height === height ? before : { width, height }))
    }
    measure()
    const observer = new ResizeObserver(measure)
    observer.observe(element)
    return () => observer.disconnect()
  }, [element])
  return [useCallback((next: HTMLElement | null) => setElement(next), []), size]
}
