import type { Role } from '@/lib/members/roles'

/** What each role may do, in a line for the person who gives it. Each may do all that the ones before it may. */
export const ROLE_WORDS: Record<Role, string> = {
  crew: 'Pour crew: sees every screen, is told when a tree is dry.',
  operator: 'And logs dips, holds, looks, moves and readings.',
  supervisor: 'And keeps trees, recipes, places, baths and sensors, lifts holds, releases.',
  owner: 'And keeps the people, the settings and the backups.',
}
