import { nameList } from '@/lib/format/name-list'

/**
 * What stayed of the demo, as a sentence; empty where nothing did.
 *
 * @example keptWords([{ kind: 'place', name: 'Boat shed' }]) // => 'Kept, because what is real stands on it: place Boat shed.'
 */
export function keptWords(kept: readonly { kind: string; name: string }[]): string {
  if (kept.length === 0) return ''
  return `Kept, because what is real stands on ${kept.length === 1 ? 'it' : 'them'}: ${nameList(kept.map(({ kind, name }) => `${kind} ${name}`))}.`
}

/** What was laid, in sentences: how many trees, in whose hours, and what could not keep its name. */
export function laidWords({
  treeCount,
  isInOwnHours,
  renamed,
}: {
  treeCount: number
  isInOwnHours: boolean
  renamed: readonly { name: string; into: string }[]
}): string {
  const sentences = [`Demo data is laid: ${treeCount} trees with two weeks of air and coats.`]
  if (!isInOwnHours) sentences.push('Your hours leave no room for so much work, so its people keep hours of their own.')
  if (renamed.length > 0) sentences.push(`Beside yours stand ${nameList(renamed.map(({ into }) => into))}.`)
  return sentences.join(' ')
}
