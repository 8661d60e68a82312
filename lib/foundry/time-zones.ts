/** Names of the IANA time zones that this runtime knows, UTC first, then in order. */
export function timeZones(): string[] {
  return [...new Set(['UTC', ...Intl.supportedValuesOf('timeZone')])]
}

/** Whether this is the name of an IANA zone; older names of a zone count too, an offset such as '+02:00' does not. */
export function isTimeZone(name: string): boolean {
  if (!/^[A-Z]/i.test(name)) return false
  try {
    return new Intl.DateTimeFormat('en-GB', { timeZone: name }).resolvedOptions().timeZone !== ''
  } catch {
    return false
  }
}
