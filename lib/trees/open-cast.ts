import { isSameName } from '@/lib/format/same-name'
import type { PieceValues } from '@/lib/trees/tree-form-values'

/** A piece that hangs on a tree that is still open. */
export type OpenCast = { workTitle: string; sectionName: string; editionNumber: number; tag: string }

/**
 * The open tree that carries the newest cast of a piece as typed; null when none does. Casts come oldest first.
 *
 * @example openCast({ workTitle: 'otter gate', sectionName: 'panel 2', editionNumber: '3', isRecast: true }, casts) // => 'T-104'
 */
export function openCast(typed: PieceValues, casts: readonly OpenCast[]): string | null {
  const found = casts.findLast(
    (cast) =>
      isSameName(cast.workTitle, typed.workTitle) &&
      isSameName(cast.sectionName, typed.sectionName) &&
      cast.editionNumber === Number(typed.editionNumber),
  )
  return found?.tag ?? null
}
