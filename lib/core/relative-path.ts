/**
 * A path on this site to go to after signing in, or the fallback.
 *
 * The value comes from the address bar, so anything that could leave the site is dropped: another origin, '//host',
 * a backslash that browsers read as a slash, control characters.
 */
export function relativePath(value: string | null | undefined, fallback: string): string {
  if (!value || !value.startsWith('/') || value.startsWith('//')) return fallback
  if (value.includes('\\') || hasControlCharacter(value)) return fallback
  return value
}

function hasControlCharacter(value: string): boolean {
  for (let index = 0; index < value.length; index += 1) {
    const code = value.charCodeAt(index)
    if (code < 0x20 || code === 0x7f) return true
  }
  return false
}
