import type { ReactNode } from 'react'

/** A plate's part that folds: its line says the gist. */
export function Fold({ title, line, isOpen = false, children }: { title: string; line: ReactNode; isOpen?: boolean; children: ReactNode }) {
  return (
    <details className="room-fold" open={isOpen || undefined}>
      <summary>
        <h2>{title}</h2>
        <span>{line}</span>
      </summary>
      <div className="room-fold-body">{children}</div>
    </details>
  )
}
