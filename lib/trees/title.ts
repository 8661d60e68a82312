export type PieceName = { workTitle: string; sectionName: string; editionNumber: number }

/**
 * What hangs on a tree, in one line: 'Otter Gate, panel 2', 'Kelp Bowl, 2 pieces', 'Kelp Bowl and 2 more'.
 *
 * Shape: the tree's pieces, in any order; an empty list gives 'No piece'.
 */
export function treeTitle(pieces: readonly PieceName[]): string {
  const [first, ...others] = pieces
  if (!first) return 'No piece'
  if (others.length === 0) return first.sectionName === '' ? first.workTitle : `${first.workTitle}, ${first.sectionName}`
  const works = new Set(pieces.map((piece) => piece.workTitle))
  return works.size === 1 ? `${first.workTitle}, ${pieces.length} pieces` : `${first.workTitle} and ${others.length} more`
}
