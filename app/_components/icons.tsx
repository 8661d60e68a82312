import type { ReactNode } from 'react'

/** The product's own marks, one 24 x 24 drawing each. Marks of tree states are in state-mark.tsx. */
const DRAWINGS = {
  floor: (
    <>
      <path d="M3 5h8v6H3zM3 14h8v6H3z" fill="currentColor" />
      <path d="M14 3v18" stroke="currentColor" strokeWidth="2.6" />
      <path d="M17 6h4M17 12h4M17 18h4" stroke="currentColor" strokeWidth="2.6" />
    </>
  ),
  list: <path d="M3 5h18M3 12h18M3 19h18" stroke="currentColor" strokeWidth="2.8" />,
  hold: (
    <>
      <path d="M12 9C12 4 14 1.5 17.5 2.5S20 8 15 7.5" fill="none" stroke="currentColor" strokeWidth="2" />
      <path fillRule="evenodd" d="M8.5 6.5h7L19 11v11.5H5V11zM12 9.3a1.7 1.7 0 1 0 0 3.4a1.7 1.7 0 1 0 0-3.4z" fill="currentColor" />
    </>
  ),
  room: (
    <>
      <path d="M9 3.5h6v9.3a5 5 0 1 1-6 0z" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <circle cx="12" cy="16.7" r="2.6" fill="currentColor" />
      <path d="M12 8v8" stroke="currentColor" strokeWidth="2.4" />
    </>
  ),
  bath: (
    <path d="M1.5 8c3.5-4 7 4 10.5 0s7 4 10.5 0M1.5 16c3.5-4 7 4 10.5 0s7 4 10.5 0" fill="none" stroke="currentColor" strokeWidth="2.6" />
  ),
  stir: (
    <>
      <path d="M3 9v6a9 5.5 0 0 0 18 0V9" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M3 9a9 4 0 0 0 10 3.9M21 9a9 4 0 0 0-5-3.5" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M16.5 1L11 11" stroke="currentColor" strokeWidth="3" />
    </>
  ),
  warning: <path fillRule="evenodd" d="M12 1.5L23 21.5H1zM10.8 8.5h2.4v6.7h-2.4zM10.8 17.1h2.4v2.4h-2.4z" fill="currentColor" />,
  check: <path d="M3.5 12.5l6 6.5L21 4.5" fill="none" stroke="currentColor" strokeWidth="3.4" />,
  cross: <path d="M4 4l16 16M20 4L4 20" stroke="currentColor" strokeWidth="3" />,
  plus: <path d="M12 3v18M3 12h18" stroke="currentColor" strokeWidth="3" />,
  minus: <path d="M3 12h18" stroke="currentColor" strokeWidth="3" />,
  down: <path d="M4 8l8 8 8-8" fill="none" stroke="currentColor" strokeWidth="3.2" />,
  up: <path d="M4 16l8-8 8 8" fill="none" stroke="currentColor" strokeWidth="3.2" />,
  back: <path d="M15 4l-8 8 8 8" fill="none" stroke="currentColor" strokeWidth="3" />,
  hand: <path d="M6 21v-7l-3-4 2-1.5 3 2.5V4h2.5v6h1V3h2.5v7h1V4.5H17V14l-2 7z" fill="none" stroke="currentColor" strokeWidth="2" />,
  /** Half a drop: still wet. */
  drop: (
    <>
      <path
        d="M12 3.3c3.5 4.6 5.8 7.7 5.8 11.2a5.8 5.8 0 0 1-11.6 0c0-3.5 2.3-6.6 5.8-11.2z"
        fill="none"
        stroke="currentColor"
        strokeWidth="2.4"
      />
      <path d="M6 13.5h12a6 6 0 0 1-12 1z" fill="currentColor" />
    </>
  ),
  bell: (
    <>
      <path d="M5 17h14l-2-3V9.5a5 5 0 0 0-10 0V14z" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M10 20.5h4" stroke="currentColor" strokeWidth="2.6" />
    </>
  ),
  undo: (
    <>
      <path d="M8 4L3 9l5 5" fill="none" stroke="currentColor" strokeWidth="2.8" />
      <path d="M4 9h10a6 6 0 0 1 0 12H8" fill="none" stroke="currentColor" strokeWidth="2.8" />
    </>
  ),
  patch: (
    <>
      <path d="M4 4h16v16H4z" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M8 8l8 8m0-8l-8 8" stroke="currentColor" strokeWidth="2.4" />
    </>
  ),
  /** A tag on its wire: the list of trees. */
  tag: <path fillRule="evenodd" d="M7 5h15v14H7l-5-4V9zM8 10.2a1.8 1.8 0 1 0 0 3.6a1.8 1.8 0 1 0 0-3.6z" fill="currentColor" />,
  /** Half a disc in shade: light and dark. */
  scheme: (
    <>
      <circle cx="12" cy="12" r="9" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M12 3a9 9 0 0 1 0 18z" fill="currentColor" />
    </>
  ),
  /** A heart of the worker that stopped: a flat line after one beat. */
  pulse: <path d="M1.5 13H7l2.5-7 3.5 12 2-5h7.5" fill="none" stroke="currentColor" strokeWidth="2.6" strokeLinejoin="round" />,
} satisfies Record<string, ReactNode>

export type IconName = keyof typeof DRAWINGS

/** Always decoration: the word stands beside it, or the key that holds it has a label. */
export function Icon({ name, className = '' }: { name: IconName; className?: string }) {
  return (
    <svg className={`mark ${className}`} viewBox="0 0 24 24" aria-hidden="true" focusable="false">
      {DRAWINGS[name]}
    </svg>
  )
}
