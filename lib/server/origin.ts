import { env } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'

const LOOPBACK = /^(?:localhost|127(?:\.\d{1,3}){3}|\[::1\])$/

/**
 * Whether a Host header names this machine itself, or the address that people open. Another site can point its own name at this
 * machine, and its pages then count as ours; only the name gives it away.
 *
 * @param address NEXTAUTH_URL.
 */
export function isOwnHost(host: string | null, address: string): boolean {
  if (host === null) return false
  if (host === new URL(address).host) return true
  const url = URL.canParse(`http://${host}`) ? new URL(`http://${host}`) : null
  return url !== null && LOOPBACK.test(url.hostname)
}

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

/**
 * Refuses the first owner under a name that is not ours. Where a setup code is asked for, that one keeps others out, and the name may
 * be any by which this server is reached.
 *
 * @throws {AppError} forbidden.
 */
export function requireOwnHost(host: string | null): void {
  const { NEXTAUTH_URL: address, SETUP_CODE: code } = env()
  if (code === undefined && !isOwnHost(host, address)) {
    throw new AppError('forbidden', `The owner’s account is made under ${new URL(address).origin}. Open that address.`)
  }
}
