/** What a member may do, from the floor to the books. */
export const ROLES = ['operator', 'supervisor', 'crew', 'owner'] as const
export type Role = (typeof ROLES)[number]
