import Link from 'next/link'
import type { ReactNode } from 'react'
import { usePress } from '@/app/_components/use-press'

export type RowKeyProps = {
  treeId: string
  tag: string
  /** Absent for those who only look: the row then leads to the tree's page. */
  onPress: (() => void) | undefined
  isChosen?: boolean
  className: string
  style?: React.CSSProperties
  children: ReactNode
}

/** A whole row as one key. */
export function RowKey({ treeId, tag, onPress, isChosen, className, style, children }: RowKeyProps) {
  const press = usePress(onPress)
  if (!onPress) {
    return (
      <Link className={className} style={style} href={`/trees/${encodeURIComponent(tag)}`} prefetch={false} data-tree-row={treeId}>
        {children}
      </Link>
    )
  }
  return (
    <button type="button" className={className} style={style} {...press} aria-pressed={isChosen} data-tree-row={treeId}>
      {children}
    </button>
  )
}
