import type { ReactNode } from 'react'
import { stateTone, stateWords } from '@/lib/format/state-words'
import type { TreeState } from '@/lib/trees/states'

const DROP = 'M12 3.3c3.5 4.6 5.8 7.7 5.8 11.2a5.8 5.8 0 0 1-11.6 0c0-3.5 2.3-6.6 5.8-11.2z'
const BAR = 'M2.5 21h19'

/** One shape per state, so that a greyscale picture still tells them apart. */
const MARKS: Record<TreeState, ReactNode> = {
  'bare wax': <path d="M5 3.5h4.5a8.5 8.5 0 0 1 0 17H5z" fill="none" stroke="currentColor" strokeWidth="2.6" />,
  'wax ready': (
    <>
      <path d="M4 3.5h3.5a8.5 8.5 0 0 1 0 17H4z" fill="none" stroke="currentColor" strokeWidth="2.6" />
      <path d="M12.5 12l3.5 4 6.5-9" fill="none" stroke="currentColor" strokeWidth="3" />
    </>
  ),
  wet: <path d="M12 1.5c4 5.4 7 8.8 7 13a7 7 0 0 1-14 0c0-4.2 3-7.6 7-13z" fill="currentColor" />,
  drying: (
    <>
      <path d={DROP} fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M6 13.5h12a6 6 0 0 1-12 1z" fill="currentColor" />
    </>
  ),
  'nearly dry': (
    <>
      <path d={DROP} fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M7.5 17.5h9a5.5 5.5 0 0 1-9 0z" fill="currentColor" />
    </>
  ),
  'dip now': (
    <>
      <path d="M2.5 4h19L12 17z" fill="currentColor" />
      <path d={BAR} stroke="currentColor" strokeWidth="3" fill="none" />
    </>
  ),
  waiting: (
    <>
      <path d="M4.5 5h15L12 15z" fill="none" stroke="currentColor" strokeWidth="2.4" strokeLinejoin="round" />
      <path d={BAR} stroke="currentColor" strokeWidth="3" fill="none" />
    </>
  ),
  overdue: <path d="M3 1.5h18L12 12zM3 12h18L12 23z" fill="currentColor" />,
  'last coat on': (
    <>
      <path d="M9 4c3 4 5 6.6 5 9.6a5 5 0 0 1-10 0c0-3 2-5.6 5-9.6z" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M4 13.5h10a5 5 0 0 1-10 0z" fill="currentColor" />
      <path d="M15.5 2.5a9.5 9.5 0 0 1 0 19" stroke="currentColor" strokeWidth="2.8" fill="none" />
    </>
  ),
  'dried out': (
    <>
      <path d="M4 3.5h5a8.5 8.5 0 0 1 0 17H4z" fill="none" stroke="currentColor" strokeWidth="2.4" />
      <path d="M15.5 2.5a9.5 9.5 0 0 1 0 19" stroke="currentColor" strokeWidth="2.4" fill="none" strokeDasharray="3.2 2.4" />
    </>
  ),
  'ready for burnout': (
    <>
      <path d="M3.5 2.5H9a9.5 9.5 0 0 1 0 19H3.5z" fill="currentColor" />
      <path d="M15 2.5a9.5 9.5 0 0 1 0 19" stroke="currentColor" strokeWidth="3" fill="none" />
    </>
  ),
  released: (
    <>
      <path d="M2.5 2.5H7a9.5 9.5 0 0 1 0 19H2.5z" fill="currentColor" />
      <path d="M13.5 5.5l6.5 6.5-6.5 6.5" stroke="currentColor" strokeWidth="3.2" fill="none" />
    </>
  ),
  held: (
    <>
      <path d="M12 9C12 4 14 1.5 17.5 2.5S20 8 15 7.5" fill="none" stroke="currentColor" strokeWidth="2" />
      <path fillRule="evenodd" d="M8.5 6.5h7L19 11v11.5H5V11zM12 9.3a1.7 1.7 0 1 0 0 3.4a1.7 1.7 0 1 0 0-3.4z" fill="currentColor" />
    </>
  ),
  // Half a drop, the other half a question: the water is there, how much is not known.
  unknown: (
    <>
      <path d="M10.6 3.3C7.1 7.9 4.8 11 4.8 14.5a5.8 5.8 0 0 0 5.8 5.8" fill="none" stroke="currentColor" strokeWidth="2.6" />
      <path
        d="M13.2 10.4a3.3 3.3 0 1 1 5.4 2.5c-1.3 1.05-2.1 1.7-2.1 3.3m0 2.200v2.600"
        fill="none"
        stroke="currentColor"
        strokeWidth="2.6"
      />
    </>
  ),
  // A section struck through twice.
  scrapped: (
    <>
      <path d="M5 3.5h5.5a8.5 8.5 0 0 1 0 17H5z" fill="none" stroke="currentColor" strokeWidth="2.2" />
      <path d="M1 9.5h22M1 14.5h22" stroke="currentColor" strokeWidth="2.6" fill="none" />
    </>
  ),
}

export function StateGlyph({ state, className = '' }: { state: TreeState; className?: string }) {
  return (
    <svg className={`mark ${className}`} viewBox="0 0 24 24" aria-hidden="true" focusable="false">
      {MARKS[state]}
    </svg>
  )
}

export type StateMarkProps = {
  state: TreeState
  /** Waiting and overdue count from here. */
  since?: number | null
  now?: number
  /** Words instead of the state's own, where the place already names it. */
  words?: string
  className?: string
}

/** A state: its mark, then its word, then its colour. */
export function StateMark({ state, since = null, now = 0, words, className = '' }: StateMarkProps) {
  return (
    <span className={`state state-${stateTone(state)} ${className}`}>
      <StateGlyph state={state} />
      <span>{words ?? stateWords(state, since, now)}</span>
    </span>
  )
}
