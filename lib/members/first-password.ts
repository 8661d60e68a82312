/** A password that somebody else has made is good for one change, and this long. */
export const FIRST_PASSWORD_MS = 24 * 3_600_000
