import { FOUNDRY_PAGES, OFFICE_TABS, pagesFor } from '@/lib/members/office-pages'
import type { Role } from '@/lib/members/roles'

/** The letter after `g` for each page of the office. */
const PAGE_KEYS: Readonly<Record<string, string>> = {
  f: '/floor',
  t: '/trees',
  b: '/burnout',
  r: '/room',
  p: '/recipes',
  w: '/works',
  s: '/settings',
  h: '/history',
  m: '/me',
}

/** One line of the list of keys; `page` where it leads to one. */
export type OfficeKey = { keys: readonly string[]; does: string; page?: string }

/** What the keyboard does in the office, for the list that `?` opens. */
export const OFFICE_KEYS: readonly OfficeKey[] = [
  { keys: ['/'], does: 'find a tree' },
  { keys: ['↓', '↑'], does: 'along the rows of a list; Enter opens one' },
  { keys: ['Esc'], does: 'leave a field, close what is open' },
  ...Object.entries(PAGE_KEYS).map(([key, page]) => ({ keys: ['g', key], does: `to ${wordOf(page)}`, page })),
  { keys: ['?'], does: 'this list' },
]

function wordOf(page: string): string {
  if (page === '/me') return 'your own page'
  return [...OFFICE_TABS, ...FOUNDRY_PAGES].find(({ href }) => href === page)?.word ?? page
}

/**
 * The page that a letter after `g` leads a role to; null where there is none, or not for them.
 *
 * @example pageOfKey('t', 'crew') // => '/trees'
 * @example pageOfKey('h', 'crew') // => null
 */
export function pageOfKey(key: string, role: Role): string | null {
  const page = PAGE_KEYS[key]
  if (page === undefined) return null
  return mayOpen(page, role) ? page : null
}

/** Whether a role may open a page that a key leads to. */
export function mayOpen(page: string, role: Role): boolean {
  return page === '/me' || pagesFor(role, [...OFFICE_TABS, ...FOUNDRY_PAGES]).some(({ href }) => href === page)
}
