/** What a member may do, from the floor to the books. */
export const ROLES = ['operator', 'supervisor', 'crew', 'owner'] as const
export type Role = (typeof ROLES)[number]

/** Each role may do all that the ones before it may. Crew is the pour crew: it looks and listens. */
export const ROLE_ORDER = ['crew', 'operator', 'supervisor', 'owner'] as const satisfies readonly Role[]

/** The lowest role that may do each act. The only place where rights are written down. */
const LOWEST_ROLE = {
  /** Every screen of the floor, and every chart. */
  see: 'crew',
  /** Notices on one's own devices, and watching a tree. */
  subscribe: 'crew',
  /** One's own password: the one act that is open with a password that somebody else has made. */
  'own password': 'crew',
  dip: 'operator',
  /** Taking back one's own dip within ten minutes. Later, or another's, is `correct`. */
  undo: 'operator',
  hold: 'operator',
  move: 'operator',
  /** What one weighs, feels and sees on the newest coat; withdrawing one's own within ten minutes. */
  evidence: 'operator',
  /** A reading typed from the wall hygrometer. */
  read: 'operator',
  stir: 'operator',
  /** Saying that the fans of a place are on or off now. */
  fans: 'operator',
  trees: 'supervisor',
  intake: 'supervisor',
  'lift hold': 'supervisor',
  'look over': 'supervisor',
  release: 'supervisor',
  correct: 'supervisor',
  recipes: 'supervisor',
  works: 'supervisor',
  places: 'supervisor',
  baths: 'supervisor',
  sensors: 'supervisor',
  history: 'supervisor',
  /** Taking over what finished coats say of needs and factors, and going back on it. */
  calibrate: 'supervisor',
  people: 'owner',
  settings: 'owner',
  /** Backups, the health page, demo data. */
  upkeep: 'owner',
} as const satisfies Record<string, Role>

export type Act = keyof typeof LOWEST_ROLE

/**
 * Whether a member of this role may do this act.
 *
 * @example may('operator', 'dip') // => true
 * @example may('crew', 'dip') // => false
 */
export function may(role: Role, act: Act): boolean {
  return ROLE_ORDER.indexOf(role) >= ROLE_ORDER.indexOf(LOWEST_ROLE[act])
}

/**
 * For whom something is that needs a role: 'a supervisor or the owner'.
 *
 * @example roleWords('owner') // => 'the owner'
 */
export function roleWords(lowest: Role): string {
  if (lowest === 'owner') return 'the owner'
  return lowest === 'supervisor' ? 'a supervisor or the owner' : `those with the role ${lowest} or one above it`
}

/**
 * The roles that may do this act, lowest first; for sentences such as 'This needs a supervisor.'
 *
 * @example rolesFor('release') // => ['supervisor', 'owner']
 */
export function rolesFor(act: Act): readonly Role[] {
  return ROLE_ORDER.filter((role) => may(role, act))
}
