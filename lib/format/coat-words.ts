import type { CoatKind, Stucco } from '@/lib/coats/vocabulary'

/** How far a tree has come: '5 on, dip 6 of 8', or '8 of 8 on' when nothing is left to dip. */
export function coatsOnWords(tree: { coatsOn: number; coats: readonly unknown[]; next: { number: number } | null }): string {
  const total = Math.max(tree.coats.length, tree.coatsOn)
  return tree.next === null
    ? `${tree.coatsOn} of ${total} on`
    : `${tree.coatsOn} on, dip ${tree.next.number} of ${Math.max(total, tree.next.number)}`
}

/** Stucco as a choice on a key. */
export function stuccoWord(stucco: Stucco): string {
  return stucco === 'none' ? 'None (seal)' : stucco.charAt(0).toUpperCase() + stucco.slice(1)
}

/** What follows the bath's name at the head of a run: 'then fine stucco', 'no stucco'. */
export function thenStucco(stucco: Stucco): string {
  return stucco === 'none' ? 'no stucco' : `then ${stucco} stucco`
}

/** 'dip 6', or 'dip 8, seal' where the kind matters to the hand. */
export function dipWords(number: number, kind: CoatKind): string {
  return kind === 'seal' ? `dip ${number}, seal` : kind === 'core fill' ? `dip ${number}, core fill` : `dip ${number}`
}
