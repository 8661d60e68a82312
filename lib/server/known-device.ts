import { createHmac, randomBytes, timingSafeEqual } from 'node:crypto'
import { cookies } from 'next/headers'
import { env } from '@/lib/core/env'

const DEVICE_COOKIE = 'kilnward-device'
const YEAR_S = 365 * 86_400

/** Signed, so that nobody makes up devices and with each a fresh allowance. */
const markOf = (id: string) => createHmac('sha256', env().NEXTAUTH_SECRET).update(`known device ${id}`).digest('base64url')

/** The id of a device from which somebody has signed in before; null for a stranger. It says nothing about who may do what. */
export async function knownDevice(): Promise<string | null> {
  const [id = '', mark = ''] = (await cookies()).get(DEVICE_COOKIE)?.value.split('.') ?? []
  const [given, right] = [Buffer.from(mark), Buffer.from(markOf(id))]
  return id !== '' && given.length === right.length && timingSafeEqual(given, right) ? id : null
}

/** Remembers this device for a year from its newest sign-in. */
export async function rememberDevice(): Promise<void> {
  const id = (await knownDevice()) ?? randomBytes(16).toString('base64url')
  const jar = await cookies()
  jar.set(DEVICE_COOKIE, `${id}.${markOf(id)}`, {
    httpOnly: true,
    sameSite: 'lax',
    secure: env().NEXTAUTH_URL.startsWith('https:'),
    path: '/',
    maxAge: YEAR_S,
  })
}
