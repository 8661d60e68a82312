import { randomBytes } from 'node:crypto'
import { NextResponse, type NextRequest } from 'next/server'
import { env } from '@/lib/core/env'
import { contentPolicy } from '@/lib/server/content-policy'

const TWO_YEARS_SECONDS = 63_072_000

/** Gives each page its content policy. It lets nobody in and keeps nobody out: every page, route and action does that itself. */
export function proxy(request: NextRequest): NextResponse {
  const { NEXTAUTH_URL: address, NODE_ENV: mode } = env()
  const isHttps = address.startsWith('https:')
  const policy = contentPolicy({ nonce: randomBytes(16).toString('base64'), isDev: mode === 'development', isHttps })
  // The framework reads the nonce from here, and overwrites what a client may have sent.
  const headers = new Headers(request.headers)
  headers.set('content-security-policy', policy)
  const response = NextResponse.next({ request: { headers } })
  response.headers.set('content-security-policy', policy)
  if (isHttps) response.headers.set('strict-transport-security', `max-age=${TWO_YEARS_SECONDS}`)
  return response
}

export const config = {
  // All but the API and files, which next.config.mjs gives a policy of their own. By path only: a condition on a header could be met
  // by whoever sends it.
  matcher: '/((?!api/|_next/static/|_next/image|icons/|pictures/|favicon\\.ico$|sw\\.js$|manifest\\.webmanifest$).*)',
}
