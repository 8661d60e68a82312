/**
 * A browser and its system in the words of its owner, from its user-agent line: 'Chrome on Android'.
 * A rough reading for a list of one's own sessions; nothing depends on it.
 *
 * @example browserName('Mozilla/5.0 (X11; Linux x86_64) AppleWebKit/537.36 (KHTML, like Gecko) Chrome/141.0 Safari/537.36') // => 'Chrome on Linux'
 */
export function browserName(userAgent: string): string {
  const browser = BROWSERS.find(([, mark]) => mark.test(userAgent))?.[0] ?? 'Unknown browser'
  const system = SYSTEMS.find(([, mark]) => mark.test(userAgent))?.[0]
  return system ? `${browser} on ${system}` : browser
}

// The order matters: browsers name those before them.
const BROWSERS: readonly [string, RegExp][] = [
  ['Edge', /Edg(e|A|iOS)?\//],
  ['Firefox', /Firefox\/|FxiOS\//],
  ['Chrome', /Chrom(e|ium)\/|HeadlessChrome\/|CriOS\//],
  ['Safari', /Safari\//],
]
const SYSTEMS: readonly [string, RegExp][] = [
  ['Android', /Android/],
  ['iPhone', /iPhone/],
  ['iPad', /iPad/],
  ['Windows', /Windows/],
  ['Mac', /Mac OS X|Macintosh/],
  ['Linux', /Linux|X11/],
]
