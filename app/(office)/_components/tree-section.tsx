'use client'

import { ShellSection } from '@/app/_components/shell-section'
import type { QueueTree } from '@/lib/queue/contract'
import { sectionOf } from '@/lib/trees/section'

export type TreeSectionProps = {
  tree: Pick<QueueTree, 'state' | 'coatsOn' | 'coats' | 'openDry' | 'openTarget'>
  height?: number
  width?: number
  fit?: number
  isDecoration?: boolean
  className?: string
}

/**
 * A tree's shell section. Drawn in the browser from the tree's few figures: two hundred drawings as markup would
 * travel twice.
 */
export function TreeSection({ tree, ...size }: TreeSectionProps) {
  return <ShellSection {...sectionOf(tree)} {...size} />
}
