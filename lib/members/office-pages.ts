import { may, type Act, type Role } from '@/lib/members/roles'

export type OfficePage = { href: string; word: string; act: Act }

/** The tabs of the office, in the order of a day. */
export const OFFICE_TABS: readonly OfficePage[] = [
  { href: '/floor', word: 'Floor', act: 'see' },
  { href: '/trees', word: 'Trees', act: 'see' },
  { href: '/burnout', word: 'Burnout', act: 'see' },
  { href: '/room', word: 'Room', act: 'see' },
  { href: '/recipes', word: 'Recipes', act: 'see' },
  { href: '/works', word: 'Works', act: 'see' },
  { href: '/settings', word: 'Foundry', act: 'places' },
]

/** What stands behind the last tab: how the foundry is set up, who works in it, what has changed, and whether all is well. */
export const FOUNDRY_PAGES: readonly OfficePage[] = [
  { href: '/settings', word: 'The foundry', act: 'places' },
  { href: '/settings/hours', word: 'Hours and closed days', act: 'places' },
  { href: '/settings/places', word: 'Places', act: 'places' },
  { href: '/settings/baths', word: 'Baths', act: 'baths' },
  { href: '/settings/sensors', word: 'Sensors', act: 'sensors' },
  { href: '/settings/mqtt', word: 'MQTT', act: 'sensors' },
  { href: '/calibration', word: 'Calibration', act: 'calibrate' },
  { href: '/people', word: 'People', act: 'people' },
  { href: '/history', word: 'History', act: 'history' },
  { href: '/upkeep', word: 'Upkeep', act: 'upkeep' },
  { href: '/api-guide', word: 'For programs', act: 'sensors' },
]

/**
 * The pages of a list that a role may open.
 *
 * @example pagesFor('crew', OFFICE_TABS).at(-1)?.word // => 'Works'
 */
export function pagesFor(role: Role, pages: readonly OfficePage[]): OfficePage[] {
  return pages.filter(({ act }) => may(role, act))
}

/**
 * The page of a list that a path belongs to: the longest address that it begins with.
 *
 * @example currentPage('/settings/places', FOUNDRY_PAGES)?.word // => 'Places'
 * @example currentPage('/trees/T-122', OFFICE_TABS)?.word // => 'Trees'
 */
export function currentPage(path: string, pages: readonly OfficePage[]): OfficePage | null {
  const fits = pages.filter(({ href }) => path === href || path.startsWith(`${href}/`))
  return fits.toSorted((one, other) => other.href.length - one.href.length)[0] ?? null
}
