import { createHmac, randomBytes, timingSafeEqual } from 'node:crypto'
import { cookies } from 'next/headers'
import { env } from '@/lib/core/env'

const DEVICE_COOKIE = 'kilnward-device'
const YEAR_S = 365 * 86_400
/** More than share a tablet in one shell room; the one who came longest ago is forgotten first. */
const MOST_MEMBERS = 12

/** Signed, so that nobody makes up devices and with each a fresh allowance, nor turns their own into somebody else's. */
const markOf = (id: string, email: string) =>
  createHmac('sha256', env().NEXTAUTH_SECRET).update(`known device ${id} ${email.trim().toLowerCase()}`).digest('base64url')

const isSame = (given: string, right: string) => given.length === right.length && timingSafeEqual(Buffer.from(given), Buffer.from(right))

async function readCookie(): Promise<{ id: string; marks: string[] }> {
  const [id = '', ...marks] = (await cookies()).get(DEVICE_COOKIE)?.value.split('.') ?? []
  return /^[\w-]{22}$/.test(id) ? { id, marks: marks.slice(0, MOST_MEMBERS) } : { id: '', marks: [] }
}

/**
 * The id of a device from which this very member has signed in before; null for a stranger's, and for a colleague's.
 * It says nothing about who may do what.
 */
export async function knownDevice(email: string): Promise<string | null> {
  const { id, marks } = await readCookie()
  const right = markOf(id, email)
  return id !== '' && marks.some((mark) => isSame(mark, right)) ? id : null
}

/** Remembers this device for a member, for a year from the newest sign-in. */
export async function rememberDevice(email: string): Promise<void> {
  const known = await readCookie()
  const id = known.id === '' ? randomBytes(16).toString('base64url') : known.id
  const mark = markOf(id, email)
  const marks = [mark, ...known.marks.filter((other) => other !== mark)].slice(0, MOST_MEMBERS)
  const jar = await cookies()
  jar.set(DEVICE_COOKIE, [id, ...marks].join('.'), {
    httpOnly: true,
    sameSite: 'lax',
    secure: env().NEXTAUTH_URL.startsWith('https:'),
    path: '/',
    maxAge: YEAR_S,
  })
}
