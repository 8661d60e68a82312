import { randomInt } from 'node:crypto'

/** Small letters and digits, without those that are taken for each other on paper or by ear: 0 o, 1 l i, b p, m n, u v. */
const CHARACTERS = 'acdefghjkqrstwxyz2345679'
const GROUPS = 4
const GROUP_LENGTH = 4

const group = () => Array.from({ length: GROUP_LENGTH }, () => CHARACTERS[randomInt(CHARACTERS.length)]).join('')

/**
 * A random first password, to be read out or written down once: four groups of four, some 73 bits.
 *
 * @example makeFirstPassword() // => 'kt4x-9dwe-h7rc-2qsa'
 */
export function makeFirstPassword(): string {
  return Array.from({ length: GROUPS }, group).join('-')
}
