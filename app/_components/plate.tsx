import type { ReactNode } from 'react'

/** A surface with a heavy top edge. The line beside the title is also the key to what the plate draws. */
export function Plate({
  title,
  line,
  children,
  className = '',
}: {
  title?: ReactNode
  line?: ReactNode
  children: ReactNode
  className?: string
}) {
  return (
    <section className={`plate ${className}`}>
      {title !== undefined && (
        <header>
          <h2>{title}</h2>
          {line !== undefined && <p>{line}</p>}
        </header>
      )}
      <div className="plate-body">{children}</div>
    </section>
  )
}
