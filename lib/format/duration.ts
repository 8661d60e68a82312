const MINUTE_MS = 60_000

/**
 * Length of time in words for the floor, whole minutes, rounded down: '35 min', '1 h 05 min', '2 d 3 h'.
 *
 * Rounding down keeps 'Waiting 35 min' true: at least that long. Under a minute is '0 min'; a negative length counts as none.
 */
export function formatDuration(milliseconds: number): string {
  const minutes = Math.max(0, Math.floor(milliseconds / MINUTE_MS))
  if (minutes < 60) return `${minutes}\u00A0min`
  const hours = Math.floor(minutes / 60)
  if (hours >= 48) {
    const rest = hours % 24
    return rest === 0 ? `${Math.floor(hours / 24)}\u00A0d` : `${Math.floor(hours / 24)}\u00A0d ${rest}\u00A0h`
  }
  const rest = minutes % 60
  return rest === 0 ? `${hours}\u00A0h` : `${hours}\u00A0h ${String(rest).padStart(2, '0')}\u00A0min`
}

/** How old a reading is: 'read just now', 'read 2 min ago'. */
export function formatReadAge(measuredAt: number, now: number): string {
  const age = now - measuredAt
  return age < MINUTE_MS ? 'read just now' : `read ${formatDuration(age)} ago`
}

const ROUGH_STEP_MS = 5 * MINUTE_MS

/** A length of time that rests on a forecast, to five minutes and without a sign: '14 h 20 min'. */
export function roughDuration(milliseconds: number): string {
  return formatDuration(Math.round(Math.abs(milliseconds) / ROUGH_STEP_MS) * ROUGH_STEP_MS)
}
