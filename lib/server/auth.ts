import { cookies } from 'next/headers'
import { redirect } from 'next/navigation'
import type { NextAuthOptions } from 'next-auth'
import { encode } from 'next-auth/jwt'
import credentialsProvider from 'next-auth/providers/credentials'
import { RateLimiterMemory, type RateLimiterRes } from 'rate-limiter-flexible'
import { z } from 'zod'
import { endSession } from '@/lib/commands/end-session'
import { SESSION_MS, signIn } from '@/lib/commands/sign-in'
import { systemClock } from '@/lib/core/clock'
import { env } from '@/lib/core/env'
import { AppError, notSetUp, traceOf } from '@/lib/core/errors'
import { log } from '@/lib/core/log'
import { ownPath } from '@/lib/members/own-path'
import { may, rolesFor, type Act } from '@/lib/members/roles'
import { hasMembers } from '@/lib/queries/has-members'
import { memberAt, type SessionMember } from '@/lib/queries/session-member'
import { knownDevice, rememberDevice } from '@/lib/server/known-device'
import { knownSession, openCookie } from '@/lib/server/known-sessions'
import { processWide } from '@/lib/server/process-wide'

/** The person behind a request, as the database knows them at this moment. */
export type Member = SessionMember

const credentials = z.object({ email: z.string().min(1).max(254), password: z.string().min(1).max(1000) })

// Behind the waits of each e-mail: nobody tries a thousand e-mails with one password, and hashing stays cheap to offer.
// Strangers share one allowance; a device from which this member has signed in before has its own, which they cannot use up.
const signInTries = processWide('sign-in tries', () => new RateLimiterMemory({ points: 60, duration: 60 }))

/** next-auth's own name for it. It holds two ids, so it is never split over several cookies. */
const SESSION_COOKIE = 'next-auth.session-token'

const lastLogged = processWide('next-auth log', () => new Map<string, number>())
const LOG_EVERY_MS = 60_000

/** One line per kind of trouble and minute: every stale cookie of a polling tablet would write one otherwise. */
function logSeldom(level: string, code: string, cause?: unknown): void {
  const now = systemClock.now()
  if (now - (lastLogged.get(code) ?? 0) < LOG_EVERY_MS) return
  lastLogged.set(code, now)
  log(`next-auth.${level}`, { code, cause: cause instanceof Error ? `${cause.name}: ${cause.message.slice(0, 200)}` : undefined })
}

export const authOptions: NextAuthOptions = {
  session: { strategy: 'jwt', maxAge: SESSION_MS / 1000 },
  pages: { signIn: '/sign-in', signOut: '/sign-in', error: '/sign-in' },
  providers: [
    credentialsProvider({
      name: 'E-mail and password',
      credentials: { email: { label: 'E-mail', type: 'email' }, password: { label: 'Password', type: 'password' } },
      authorize: async (input, request) => {
        const parsed = credentials.safeParse(input)
        if (!parsed.success) return null
        const device = await knownDevice(parsed.data.email)
        await signInTries.consume(device === null ? 'strangers' : `device:${device}`).catch((refusal: RateLimiterRes) => {
          throw new Error(`WAIT:${Math.ceil(refusal.msBeforeNext / 1000)}`)
        })
        const result = await signIn(
          { ...parsed.data, userAgent: String(request.headers?.['user-agent'] ?? ''), device },
          { clock: systemClock },
        ).catch((error: unknown) => {
          log('sign-in.failed', { error: traceOf(error) })
          // next-auth hands the message to the browser word for word.
          throw new Error('UNAVAILABLE')
        })
        if (result.outcome === 'wait') throw new Error(`WAIT:${result.waitSeconds}`)
        if (result.outcome === 'refused') return null
        if (result.outcome === 'first password over') throw new Error('FIRST_PASSWORD_OVER')
        await rememberDevice(result.member.email)
        log('sign-in.done', { memberId: result.member.id, sessionId: result.sessionId })
        return { id: result.member.id, sessionId: result.sessionId }
      },
    }),
  ],
  callbacks: {
    // Only ids travel in the cookie: name and role are read from the database each time.
    jwt: ({ token, user }) => (user && 'sessionId' in user ? { sub: user.id, sid: user.sessionId } : token),
    session: async ({ session, token }) => {
      const member = await memberOf(token)
      // next-auth answers a throw here with an empty session and takes the cookie away.
      if (!member) throw new Error('This session has ended.')
      return { expires: session.expires, user: { name: member.name, email: member.email, role: member.role } }
    },
    redirect: ({ url, baseUrl }) => `${baseUrl}${ownPath(url, baseUrl)}`,
  },
  events: {
    signOut: async ({ token }) => {
      const sessionId = token?.['sid']
      if (typeof sessionId === 'string') await endSession(sessionId, { clock: systemClock })
    },
  },
  logger: {
    error: (code, metadata) => logSeldom('error', code, metadata instanceof Error ? metadata : metadata.error),
    warn: (code) => logSeldom('warn', code),
    debug: () => {},
  },
}

async function memberOf(token: Record<string, unknown> | null): Promise<Member | null> {
  const sessionId = token?.['sid']
  return typeof sessionId === 'string' ? memberAt(await knownSession(sessionId), systemClock.now()) : null
}

/** The session cookie's name: browsers refuse the prefix on plain http. */
const sessionCookie = () => (env().NEXTAUTH_URL.startsWith('https:') ? `__Secure-${SESSION_COOKIE}` : SESSION_COOKIE)

/** Gives this browser another session of the same member, in an action or a route: after a change of password, say. */
export async function moveToSession(memberId: string, sessionId: string): Promise<void> {
  const { NEXTAUTH_URL: address, NEXTAUTH_SECRET: secret } = env()
  const maxAge = SESSION_MS / 1000
  const value = await encode({ token: { sub: memberId, sid: sessionId }, secret, maxAge })
  const jar = await cookies()
  jar.set(sessionCookie(), value, { httpOnly: true, sameSite: 'lax', secure: address.startsWith('https:'), path: '/', maxAge })
}

/**
 * The member who sent this request; null when nobody is signed in.
 *
 * Reads the cookie itself instead of asking next-auth for a session: that would turn a failing database into 'signed out'.
 */
export async function currentMember(): Promise<Member | null> {
  // First, so that the build sees a page that needs a request before it asks for settings it does not have.
  const jar = await cookies()
  const { NEXTAUTH_SECRET: secret } = env()
  const cookie = jar.get(sessionCookie())
  // A stale or meddled cookie is the same as none.
  return cookie ? memberOf(await openCookie(cookie.value, secret)) : null
}

/**
 * The member who sent this request, when their role may do this act. The first call of every handler and server action:
 * no layout or proxy guards them. With a password that somebody else has made, only a new password may be made.
 *
 * @throws {AppError} unauthenticated or forbidden; unavailable while nobody is a member.
 */
export async function requireMember(act: Act): Promise<Member> {
  const member = await currentMember()
  if (!member) throw (await hasMembers()) ? new AppError('unauthenticated', 'Sign in first.') : notSetUp()
  if (member.mustChangePassword && act !== 'own password') {
    throw new AppError('forbidden', 'Make a password of your own first: yours was made by somebody else.')
  }
  if (!may(member.role, act)) {
    const [lowest] = rolesFor(act)
    throw new AppError('forbidden', `This needs the role ${lowest}${lowest === 'owner' ? '' : ' or one above it'}.`)
  }
  return member
}

/**
 * The same for a page: sends a stranger to the sign-in page and back to `path` after it, and says there when a session has ended;
 * a member with a first password to the page where they make their own, and one without the right to the floor,
 * which everybody may see. Until the foundry is set up, everybody goes to the first run.
 */
export async function requireMemberPage(act: Act, path: string): Promise<Member> {
  const member = await currentMember()
  if (!member) {
    if (!(await hasMembers())) redirect('/first-run')
    const hasEnded = (await cookies()).has(sessionCookie())
    redirect(`/sign-in?callbackUrl=${encodeURIComponent(path)}${hasEnded ? '&ended=1' : ''}`)
  }
  if (member.mustChangePassword && act !== 'own password') redirect('/me/password')
  if (!member.isFoundrySetUp && act !== 'own password') redirect('/first-run')
  // The floor says for whom the page is.
  if (!may(member.role, act)) redirect(`/floor?for=${rolesFor(act)[0]}`)
  return member
}

/**
 * The first line of what is only for records in which nobody is a member.
 *
 * @throws {AppError} conflict when somebody is.
 */
export async function requireNobody(): Promise<void> {
  // First, as in currentMember.
  await cookies()
  if (await hasMembers()) throw new AppError('conflict', 'The owner’s account has been made already. Sign in, or ask the owner.')
}
