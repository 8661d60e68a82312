/** MQTT allows 65,535 bytes; a longer one than this is a slip of the clipboard. */
export const LONGEST_FILTER = 250

/**
 * What is wrong with a topic to subscribe to, as a sentence; null where nothing is. MQTT 3.1.1, section 4.7.
 *
 * @example topicFilterFault('shop/#/air') // => 'The # stands alone at the end, after a slash: shop/#.'
 */
export function topicFilterFault(filter: string): string | null {
  if (filter === '') return 'Name the topic.'
  if (filter.length > LONGEST_FILTER) return `A topic has at most ${LONGEST_FILTER} letters.`
  if (/\p{Cc}/u.test(filter)) return 'A topic has no control characters.'
  if (filter.startsWith('$share/')) return 'A shared subscription splits the messages among programs. Name the topic alone.'
  const levels = filter.split('/')
  if (levels.some((level, index) => level.includes('#') && (level !== '#' || index < levels.length - 1))) {
    return 'The # stands alone at the end, after a slash: shop/#.'
  }
  if (levels.some((level) => level.includes('+') && level !== '+')) return 'The + stands alone between two slashes: shop/+/air.'
  return null
}

/**
 * Whether a message's topic fits a filter. MQTT 3.1.1, section 4.7: # takes the level above too, and neither # nor + a first level
 * that begins with $.
 *
 * @example topicFits('shop/+/air', 'shop/loft/air') // => true
 */
export function topicFits(filter: string, topic: string): boolean {
  const wanted = filter.split('/')
  const levels = topic.split('/')
  if (topic.startsWith('$') && (wanted[0] === '#' || wanted[0] === '+')) return false
  for (const [index, want] of wanted.entries()) {
    if (want === '#') return true
    if (index >= levels.length || (want !== '+' && want !== levels[index])) return false
  }
  return wanted.length === levels.length
}
