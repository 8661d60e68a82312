/**
 * The Content-Security-Policy of a page: its scripts and style sheets carry this answer's nonce, and nothing comes from elsewhere.
 * Style attributes are free, since charts and drawings set them; they cannot run anything.
 */
export function contentPolicy({ nonce, isDev, isHttps }: { nonce: string; isDev: boolean; isHttps: boolean }): string {
  const own = `'self' 'nonce-${nonce}'`
  const directives = [
    "default-src 'self'",
    // The development server builds code from text and puts its styles in as they are.
    `script-src ${own} 'strict-dynamic'${isDev ? " 'unsafe-eval'" : ''}`,
    `style-src-elem ${isDev ? "'self' 'unsafe-inline'" : own}`,
    "style-src-attr 'unsafe-inline'",
    // For browsers that know neither of the two above.
    "style-src 'self' 'unsafe-inline'",
    "img-src 'self' data: blob:",
    "font-src 'self'",
    `connect-src 'self'${isDev ? ' ws: wss:' : ''}`,
    "worker-src 'self'",
    "manifest-src 'self'",
    "frame-src 'none'",
    "object-src 'none'",
    "base-uri 'none'",
    "form-action 'self'",
    "frame-ancestors 'none'",
    ...(isHttps ? ['upgrade-insecure-requests'] : []),
  ]
  return directives.join('; ')
}
