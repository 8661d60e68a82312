/**
 * The path of a link that leads back into this site, or '/' for anything else: another host, another scheme, nonsense.
 * Use it on every address that came from outside, such as `callbackUrl`.
 *
 * @example ownPath('/trees?held=1', 'http://localhost:3000') // => '/trees?held=1'
 * @example ownPath('//evil.example/x', 'http://localhost:3000') // => '/'
 */
export function ownPath(address: string | null | undefined, origin: string): string {
  if (!address || !URL.canParse(address, origin)) return '/'
  const url = new URL(address, origin)
  // '//host/path' is a path here and another site in a link.
  const isOwn = url.origin === new URL(origin).origin && !url.pathname.startsWith('//')
  return isOwn ? `${url.pathname}${url.search}${url.hash}` : '/'
}
