import type { ReactNode } from 'react'

/** What is not used any more: folded away, and still there for the log. */
export function RetiredFold({ count, children }: { count: number; children: ReactNode }) {
  if (count === 0) return null
  return (
    <details className="retired-fold">
      <summary>Retired ({count})</summary>
      <ul className="settings-rows">{children}</ul>
    </details>
  )
}
