/** Wrong passwords that cost nothing but the try. */
const FREE_FAILURES = 5
const FIRST_WAIT_MS = 30_000
const LONGEST_WAIT_MS = 15 * 60_000
/** A count this old is forgotten. */
export const FORGET_FAILURES_AFTER_MS = 24 * 3_600_000

/**
 * How long the next try has to wait after so many failures in a row.
 *
 * Units: milliseconds. None for the first four; from the fifth on 30 s, doubled with each one, 15 min at most.
 *
 * @example waitAfterFailuresMs(6) // => 60_000
 */
export function waitAfterFailuresMs(failures: number): number {
  if (failures < FREE_FAILURES) return 0
  return Math.min(FIRST_WAIT_MS * 2 ** (failures - FREE_FAILURES), LONGEST_WAIT_MS)
}

/**
 * Whose tries are counted together at the sign-in: all strangers to one e-mail, and each known device by itself.
 *
 * @example signInSubject('ada@foundry.example', null) // => 'member:ada@foundry.example'
 */
export const signInSubject = (email: string, device: string | null): string =>
  device === null ? `member:${email}` : `member:${email}:${device}`
