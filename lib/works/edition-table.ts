import type { TreeState } from '@/lib/trees/states'

/** One casting of a section, and the tree that carries it. */
export type Cast = {
  pieceId: string
  sectionId: string
  editionNumber: number
  createdAt: number
  isRecast: boolean
  /** Null where no tree carries it. */
  tree: { tag: string; state: TreeState } | null
}

/** One section of one edition. */
export type EditionCell<Of extends Cast = Cast> = {
  sectionId: string
  /** The newest cast that was not scrapped; null when the section is missing. */
  standing: Of | null
  /** Casts before it, newest first: scrapped ones, and ones that were cast again all the same. */
  earlier: Of[]
  /** 'never cast', or 'scrapped' when the newest cast was and nobody has cast it again. */
  missing: 'never cast' | 'scrapped' | null
}

export type EditionRow<Of extends Cast = Cast> = {
  editionNumber: number
  /** In the order of the sections. */
  cells: EditionCell<Of>[]
  /** Ids of the sections of which no cast stands; empty when the edition is here. */
  missing: string[]
}

/**
 * Editions by sections: is every section of that sculpture here, and which cast of it stands? An edition has a row once a piece of
 * it was cast. A cast on a scrapped tree does not stand; a piece that no tree carries does, since nothing is known against it.
 */
export function editionTable<Of extends Cast>(sections: readonly { id: string }[], casts: readonly Of[]): EditionRow<Of>[] {
  const numbers = [...new Set(casts.map((cast) => cast.editionNumber))].toSorted((one, other) => one - other)
  return numbers.map((editionNumber) => {
    const cells = sections.map(({ id }): EditionCell<Of> => {
      const own = casts
        .filter((cast) => cast.sectionId === id && cast.editionNumber === editionNumber)
        .toSorted((one, other) => other.createdAt - one.createdAt || (one.pieceId < other.pieceId ? 1 : -1))
      const standing = own.find((cast) => cast.tree?.state !== 'scrapped') ?? null
      return {
        sectionId: id,
        standing,
        earlier: own.filter((cast) => cast !== standing),
        missing: standing !== null ? null : own.length === 0 ? 'never cast' : 'scrapped',
      }
    })
    return { editionNumber, cells, missing: cells.filter((cell) => cell.standing === null).map((cell) => cell.sectionId) }
  })
}

/** Why a cast was made again: 'recast of edition 3, because T-104 was scrapped'. Null for a first cast. */
export function recastWords(cast: Cast, before: Cast | null): string | null {
  if (!cast.isRecast) return null
  const words = `recast of edition ${cast.editionNumber}`
  if (before?.tree == null) return words
  return before.tree.state === 'scrapped'
    ? `${words}, because ${before.tree.tag} was scrapped`
    : `${words}, though ${before.tree.tag} still carries one`
}

/** How many editions are whole, in one line: '2 of 3 editions are whole; 5 more of 8 not begun'. */
export function editionVerdict(rows: readonly EditionRow[], editionSize: number | null): string {
  const [only, ...others] = rows
  if (only === undefined) return 'none is begun'
  const whole = rows.filter(({ missing }) => missing.length === 0).length
  const begun =
    others.length === 0
      ? `edition ${only.editionNumber} is ${whole === 1 ? 'whole' : 'not whole'}`
      : `${whole} of ${rows.length} editions ${whole === 1 ? 'is' : 'are'} whole`
  const toCome = editionSize === null ? 0 : editionSize - rows.length
  return toCome > 0 ? `${begun}; ${toCome} more of ${editionSize} not begun` : begun
}
