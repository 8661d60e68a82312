/** Waits after the first, second and every further failed attempt. */
const WAITS_MS = [30_000, 120_000, 600_000] as const
/** A push service may ask for patience, but not for longer than any notice lives. */
const LONGEST_WAIT_MS = 24 * 3_600_000

/**
 * When to try a delivery again: after 30 s, 2 min, then every 10 min, spread by a fifth, and never before the service allows it.
 *
 * Units: milliseconds; `attempts` counts those made, the failed one included; `jitter` lies in 0 to 1.
 * @returns null when the notice will not be worth hearing by then.
 */
export function nextAttemptAt({
  attempts,
  now,
  expiresAt,
  retryAfterMs,
  jitter,
}: {
  attempts: number
  now: number
  expiresAt: number
  retryAfterMs: number | null
  jitter: number
}): number | null {
  const wait = WAITS_MS[Math.min(Math.max(attempts, 1), WAITS_MS.length) - 1]!
  // Only later, so that Retry-After is kept.
  const spread = Math.round(Math.max(wait, retryAfterMs ?? 0) * (1 + 0.2 * jitter))
  const at = now + Math.min(spread, LONGEST_WAIT_MS)
  return at < expiresAt ? at : null
}

/**
 * `Retry-After` in milliseconds from now: seconds, or an HTTP date. Null where it is missing or makes no sense.
 */
export function readRetryAfter(header: string | undefined, now: number): number | null {
  if (header === undefined) return null
  if (/^\d{1,9}$/.test(header.trim())) return Number(header) * 1000
  const at = Date.parse(header)
  return Number.isNaN(at) ? null : Math.max(0, at - now)
}
