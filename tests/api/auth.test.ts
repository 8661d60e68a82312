import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { DOORS } from '@/tests/api/authorisation-table'
import { newClient, signIn, signOut, trySignIn, type Client } from '@/tests/setup/client'
import { seedMember, seedMembers, startRefused, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

const HOUR_MS = 3_600_000
const COOKIE = 'next-auth.session-token'

let server: TestServer
let members: Record<Role, SeededMember>

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  await buildFoundry()
})
afterAll(() => server.stop())

const health = async (): Promise<unknown> => (await newClient(server.baseUrl).fetch('/api/health')).json()
/** Whether the queue opens for this client. */
async function isIn(client: Client): Promise<boolean> {
  const { status } = await client.fetch('/api/v1/queue')
  expect([200, 401]).toContain(status)
  return status === 200
}
const enter = ({ email, password }: SeededMember) => signIn(server.baseUrl, email, password)
/** Another browser with a copy of the cookies. */
const copyOf = ({ baseUrl, cookies }: Client) => newClient(baseUrl, new Map(cookies))

describe('signing in', () => {
  it('opens the floor', async () => {
    expect(await isIn(newClient(server.baseUrl))).toBe(false)
    expect(await isIn(await enter(members.operator))).toBe(true)
  })

  it('is where a stranger is sent, and from where one comes back', async () => {
    const response = await newClient(server.baseUrl).fetch('/floor')
    expect(response.status).toBe(307)
    expect(response.headers.get('location')).toBe('/sign-in?callbackUrl=%2Ffloor')
    expect((await (await enter(members.operator)).fetch('/floor')).status).toBe(200)
  })

  it('takes the e-mail in any case', async () => {
    expect(await isIn(await signIn(server.baseUrl, 'OPERATOR@Kilnward.Example', members.operator.password))).toBe(true)
  })

  it('keeps the session cookie from scripts and other sites', async () => {
    const { setCookies } = await trySignIn(newClient(server.baseUrl), members.crew.email, members.crew.password)
    const line = setCookies.find((cookie) => cookie.startsWith(`${COOKIE}=`))
    expect(line).toMatch(/; Path=\/;/)
    expect(line).toMatch(/; HttpOnly/)
    expect(line).toMatch(/; SameSite=Lax/i)
  })

  it('puts neither name, e-mail nor role into the cookie', async () => {
    const { decode } = await import('next-auth/jwt')
    const client = await enter(members.crew)
    const secret = 'a secret of the tests, long enough for any of them'
    const token = await decode({ token: client.cookies.get(COOKIE) ?? '', secret })
    expect(Object.keys(token ?? {}).toSorted()).toEqual(['exp', 'iat', 'jti', 'sid', 'sub'])
  })

  it('answers a wrong password, an unknown e-mail and a disabled member alike', async () => {
    const { Member } = await import('@/models')
    const gone = await seedMember('crew', { email: 'gone@kilnward.example' })
    await Member.update({ disabledAt: Date.now() }, { where: { id: gone.id } })
    const tries = [
      [members.crew.email, 'not this one'],
      ['nobody@kilnward.example', 'not this one'],
      [gone.email, gone.password],
    ] as const
    for (const [email, password] of tries) {
      const { status, error, setCookies } = await trySignIn(newClient(server.baseUrl), email, password)
      expect({ status, error }).toEqual({ status: 401, error: 'CredentialsSignin' })
      expect(setCookies.some((cookie) => cookie.startsWith(COOKIE))).toBe(false)
    }
  })

  it('makes the sixth try wait, and says for how long', async () => {
    const client = newClient(server.baseUrl)
    for (let count = 0; count < 5; count += 1) {
      expect((await trySignIn(client, 'guessed@kilnward.example', 'wrong')).error).toBe('CredentialsSignin')
    }
    expect((await trySignIn(client, 'guessed@kilnward.example', 'wrong')).error).toMatch(/^WAIT:(?:[12]?\d|30)$/)
  })

  it.each(['https://evil.example/x', '//evil.example/x', '/\\evil.example', 'javascript:alert(1)'])(
    'never leads to %s',
    async (callbackUrl) => {
      const client = newClient(server.baseUrl)
      const response = await client.fetch(`/api/auth/signin?callbackUrl=${encodeURIComponent(callbackUrl)}`)
      const target = new URL(response.headers.get('location') ?? '', server.baseUrl)
      expect(target.pathname).toBe('/sign-in')
      expect(new URL(target.searchParams.get('callbackUrl') ?? '/', server.baseUrl).origin).toBe(server.baseUrl)
    },
  )

  it('takes an address to come back to that is none for a mistake of the asker', async () => {
    const response = await newClient(server.baseUrl).fetch(`/api/auth/signin?callbackUrl=${encodeURIComponent('>;')}`)
    expect(response.status).toBe(400)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
  })

  it('keeps strangers from writing into the log', async () => {
    const body = new URLSearchParams({ level: 'error', code: 'PLANTED', message: 'planted line' }).toString()
    const headers = { 'content-type': 'application/x-www-form-urlencoded' }
    const response = await newClient(server.baseUrl).fetch('/api/auth/_log', { method: 'POST', headers, body })
    expect(response.status).toBe(204)
    expect(server.output()).not.toContain('PLANTED')
  })
})

describe('a session', () => {
  it('is dead after signing out, for a copied cookie too', async () => {
    const client = await enter(members.operator)
    const copy = copyOf(client)
    expect(await isIn(copy)).toBe(true)
    expect((await signOut(client)).status).toBe(200)
    expect(client.cookies.has(COOKIE)).toBe(false)
    expect(await isIn(copy)).toBe(false)
    expect(await (await copyOf(copy).fetch('/api/auth/session')).json()).toEqual({})
  })

  it('lives on elsewhere when another one is signed out', async () => {
    const [tablet, desk] = [await enter(members.operator), await enter(members.operator)]
    await signOut(tablet)
    expect(await isIn(desk)).toBe(true)
  })

  it('ends with the next request once the member is disabled', async () => {
    const { Member } = await import('@/models')
    const leaver = await seedMember('supervisor', { email: 'leaver@kilnward.example' })
    const client = await enter(leaver)
    expect(await isIn(client)).toBe(true)
    await Member.update({ disabledAt: Date.now() }, { where: { id: leaver.id } })
    expect(await isIn(client)).toBe(false)
  })

  it('has the role of this moment, not of the sign-in', async () => {
    const { Member } = await import('@/models')
    const mover = await seedMember('owner', { email: 'mover@kilnward.example' })
    const client = await enter(mover)
    const roleNow = async (): Promise<unknown> => (await copyOf(client).fetch('/api/auth/session')).json()
    expect(await roleNow()).toMatchObject({ user: { role: 'owner' } })
    await Member.update({ role: 'crew', name: 'Moved Member' }, { where: { id: mover.id } })
    expect(await roleNow()).toMatchObject({ user: { role: 'crew', name: 'Moved Member' } })
  })

  it('loses the rights of its role with the next request', async () => {
    const { Member } = await import('@/models')
    const demoted = await seedMember('operator', { email: 'demoted@kilnward.example' })
    const client = await enter(demoted)
    expect((await client.send('POST', '/api/v1/dips', {})).status).toBe(422)
    await Member.update({ role: 'crew' }, { where: { id: demoted.id } })
    const refused = await client.send('POST', '/api/v1/dips', {})
    expect(refused.status).toBe(403)
    expect(await refused.json()).toMatchObject({
      type: 'urn:kilnward:problem:forbidden',
      detail: 'This needs the role operator or one above it.',
    })
    expect(await isIn(client)).toBe(true)
  })

  it('ends twelve hours after the sign-in, however often it was used', async () => {
    const { Session } = await import('@/models')
    const client = await enter(members.owner)
    const { sid } = await sessionIdOf(client)
    const createdAt = Date.now() - 12 * HOUR_MS - 1000
    await Session.update({ createdAt, expiresAt: createdAt + 12 * HOUR_MS + 60_000 }, { where: { id: sid } })
    await client.fetch('/api/auth/session')
    expect(await isIn(client)).toBe(true)
    await Session.update({ expiresAt: createdAt + 12 * HOUR_MS }, { where: { id: sid } })
    expect(await isIn(client)).toBe(false)
  })

  it('is not there for a meddled cookie, and a thousand of them write one line', async () => {
    const client = await enter(members.crew)
    const token = client.cookies.get(COOKIE) ?? ''
    const meddled = newClient(server.baseUrl, new Map([[COOKIE, `${token.slice(0, -4)}AAAA`]]))
    expect(await isIn(meddled)).toBe(false)
    const before = server.output().split('JWT_SESSION_ERROR').length
    for (let count = 0; count < 20; count += 1) {
      await fetch(`${server.baseUrl}/api/auth/session`, { headers: { cookie: `${COOKIE}=${token.slice(0, -4)}AAAA` } })
    }
    expect(server.output().split('JWT_SESSION_ERROR').length - before).toBeLessThanOrEqual(1)
  })

  it('is not opened by a token in an Authorization header', async () => {
    const token = (await enter(members.crew)).cookies.get(COOKIE) ?? ''
    const response = await fetch(`${server.baseUrl}/api/v1/queue`, { headers: { authorization: `Bearer ${token}` } })
    expect(response.status).toBe(401)
  })
})

async function sessionIdOf(client: Client): Promise<{ sid: string }> {
  const { decode } = await import('next-auth/jwt')
  const token = await decode({ token: client.cookies.get(COOKIE) ?? '', secret: 'a secret of the tests, long enough for any of them' })
  return { sid: String(token?.['sid']) }
}

describe('headers', () => {
  it.each(['/sign-in', '/floor', '/api/health', '/nowhere'])('%s is not sniffed, framed or referred from', async (path) => {
    const { headers } = await newClient(server.baseUrl).fetch(path)
    expect(headers.get('x-content-type-options')).toBe('nosniff')
    expect(headers.get('referrer-policy')).toBe('same-origin')
    expect(headers.get('content-security-policy')).toContain("frame-ancestors 'none'")
    expect(headers.has('x-powered-by')).toBe(false)
  })
})

describe('health', () => {
  it('is degraded while the worker does not move, and says no more', async () => {
    const { JobRun } = await import('@/models')
    expect(await health()).toEqual({ status: 'degraded' })
    const tickAt = Math.floor(Date.now() / 60_000) * 60_000
    const run = await JobRun.create({ job: 'watch-floor', tickAt, startedAt: tickAt, finishedAt: Date.now(), outcome: 'done' })
    expect(await health()).toEqual({ status: 'ok' })
    await run.update({ finishedAt: Date.now() - 3 * 60_000 - 1 })
    expect(await health()).toEqual({ status: 'degraded' })
  })
})

describe('an unexpected error', () => {
  it('shows nothing of itself to a browser, and is in the log', async () => {
    const { database } = await import('@/models')
    const client = await enter(members.owner)
    const reads = DOORS.filter(({ method, who, example }) => method === 'GET' && !['anybody', 'sensor'].includes(who) && !example)
    await database.query('ALTER TABLE sessions RENAME TO sessions_away')
    try {
      const { error } = await trySignIn(newClient(server.baseUrl), members.crew.email, members.crew.password)
      expect(error).toBe('UNAVAILABLE')
      for (const { route } of reads) {
        const response = await client.fetch(route.replaceAll(/\[[^\]]+\]/g, '1'))
        expect(response.status).toBe(500)
        expect(await response.json()).toEqual({
          type: 'urn:kilnward:problem:internal',
          title: 'internal',
          status: 500,
          detail: 'The server could not finish this request.',
        })
      }
      const page = await client.fetch('/floor')
      expect(await page.text()).not.toMatch(/sessions|SQLITE|sequelize/i)
      expect(server.output()).toContain('no such table: sessions')
    } finally {
      await database.query('ALTER TABLE sessions_away RENAME TO sessions')
    }
    expect(await isIn(client)).toBe(true)
  })
})

describe('secrets', () => {
  it('are never in the log', () => {
    const output = server.output()
    for (const { password } of Object.values(members)) expect(output).not.toContain(password)
    expect(output).not.toContain('a secret of the tests')
  })
})

describe('the start', () => {
  it.each([
    ['no secret', { NEXTAUTH_SECRET: '' }, 'NEXTAUTH_SECRET must be at least 32 characters.'],
    ['a short secret', { NEXTAUTH_SECRET: 'short' }, 'NEXTAUTH_SECRET must be at least 32 characters.'],
    ['no address', { NEXTAUTH_URL: '' }, 'NEXTAUTH_URL must be the address people open'],
    [
      'a contact that Apple refuses',
      { VAPID_SUBJECT: 'mailto:kilnward@localhost' },
      'VAPID_SUBJECT must be mailto: or https: with a real domain.',
    ],
    ['too few threads', { UV_THREADPOOL_SIZE: '' }, 'UV_THREADPOOL_SIZE must be at least 16'],
  ])('is refused with %s, in one line', async (_name, env, sentence) => {
    const { code, output } = await startRefused(env)
    expect(code).toBe(1)
    const lines = output.split('\n').filter((line) => line.includes('"start.refused"'))
    expect(lines).toHaveLength(1)
    expect(lines[0]).toContain(sentence)
  })
})
