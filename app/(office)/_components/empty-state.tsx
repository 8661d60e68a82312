import type { ReactNode } from 'react'

/** What stands in a list that has nothing yet: what will stand there, and the one key that brings the first. */
export function EmptyState({ title, children, action }: { title: string; children: ReactNode; action?: ReactNode }) {
  return (
    <section className="empty-state">
      <h2>{title}</h2>
      <p>{children}</p>
      {action}
    </section>
  )
}
