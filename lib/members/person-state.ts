/** How a member stands: may sign in, is shut out, or has yet to make a password of their own. */
export type PersonState = 'active' | 'disabled' | 'first password open' | 'first password over'

/** @param person instants in epoch ms, null where there is none. */
export function personState(
  { disabledAt, firstPasswordUntil }: { disabledAt: number | null; firstPasswordUntil: number | null },
  now: number,
): PersonState {
  if (disabledAt !== null) return 'disabled'
  if (firstPasswordUntil === null) return 'active'
  return firstPasswordUntil > now ? 'first password open' : 'first password over'
}
