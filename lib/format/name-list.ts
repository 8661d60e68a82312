const MOST_NAMES = 5

/**
 * Names in a sentence, the first five of them.
 *
 * @example nameList(['T-1', 'T-2', 'T-3']) // => 'T-1, T-2 and T-3'
 */
export function nameList(names: readonly string[]): string {
  if (names.length > MOST_NAMES) return `${names.slice(0, MOST_NAMES).join(', ')} and ${names.length - MOST_NAMES} more`
  const last = names.at(-1) ?? ''
  return names.length < 2 ? last : `${names.slice(0, -1).join(', ')} and ${last}`
}
