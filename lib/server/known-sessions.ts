import { decode, type JWT } from 'next-auth/jwt'
import { dataVersion } from '@/lib/queries/data-version'
import { loadSession, type KnownSession } from '@/lib/queries/session-member'
import { processWide } from '@/lib/server/process-wide'

// A tablet asks every three seconds, and nearly always nothing has changed since: then who it is need not be worked out again.

/** Far more than a foundry has tablets and phones. */
const MOST = 500

const sessions = processWide('known sessions', () => ({ version: -1, known: new Map<string, Promise<KnownSession | null>>() }))
const cookies = processWide('opened cookies', () => new Map<string, JWT>())

/**
 * A session as the database knows it at this moment. Read anew after any change of the records, so one that was ended, or a
 * role that was changed, acts on the next request.
 */
export async function knownSession(sessionId: string): Promise<KnownSession | null> {
  // Before the session: a change in between is then seen by the next request at the latest.
  const version = await dataVersion()
  if (sessions.version !== version || sessions.known.size >= MOST) {
    sessions.version = version
    sessions.known.clear()
  }
  const known = sessions.known.get(sessionId)
  if (known) return known
  const loading = loadSession(sessionId)
  sessions.known.set(sessionId, loading)
  // A failure must not be remembered.
  loading.catch(() => sessions.known.delete(sessionId))
  return loading
}

/** What a session cookie holds; null for one that is stale or was not made here. A failed try is not remembered. */
export async function openCookie(value: string, secret: string): Promise<JWT | null> {
  const opened = cookies.get(value)
  // Its own end lies with that of its session, which is asked for each time.
  if (opened) return opened
  const token = await decode({ token: value, secret }).catch(() => null)
  if (!token) return null
  if (cookies.size >= MOST) cookies.clear()
  cookies.set(value, token)
  return token
}
