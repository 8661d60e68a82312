import { env } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'

/**
 * Refuses a write that another site's page sent with our cookie: route handlers get no such check from the framework.
 * A missing Origin is refused as well, since every browser sends one with a write.
 *
 * @throws {AppError} forbidden.
 */
export function requireOwnOrigin(request: Request & { nextUrl: { protocol: string } }): void {
  const origin = request.headers.get('origin')
  const own = [new URL(env().NEXTAUTH_URL).origin, `${request.nextUrl.protocol}//${request.headers.get('host')}`]
  const site = request.headers.get('sec-fetch-site')
  if (origin === null || !own.includes(origin) || (site !== null && site !== 'same-origin')) {
    throw new AppError('forbidden', 'This request did not come from a page of Kilnward.')
  }
}
