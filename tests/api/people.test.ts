import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import { DOORS } from '@/tests/api/authorisation-table'
import { callAction } from '@/tests/setup/actions'
import { newClient, signIn, signOut, trySignIn, type Client } from '@/tests/setup/client'
import { seedMember, seedMembers, startServer, type SeededMember, type TestServer } from '@/tests/setup/server'

const COOKIE = 'next-auth.session-token'
const NEW_PASSWORD = 'heron on the weir at six'
const FIRST_PASSWORD = /[a-z2-9]{4}(?:-[a-z2-9]{4}){3}/
const ANY_ID = '018f7d1e-7c00-7000-8000-000000000000'
/** Everything that was secret for a moment, and must not be in the log. */
const secrets: string[] = []

let server: TestServer
let members: Record<Role, SeededMember>
let count = 0

beforeAll(async () => {
  server = await startServer()
  members = await seedMembers()
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  await buildFoundry()
  secrets.push(...Object.values(members).map(({ password }) => password))
})
afterAll(() => server.stop())
beforeEach(() => {
  count += 1
})

const enter = ({ email, password }: Pick<SeededMember, 'email' | 'password'>) => signIn(server.baseUrl, email, password)
const copyOf = ({ baseUrl, cookies }: Client) => newClient(baseUrl, new Map(cookies))
const fresh = (role: Role) => seedMember(role, { name: `Person ${count}`, email: `person${count}@kilnward.example` })

/** A member with a first password, made by the owner through their own form. */
async function addByForm(role: Role): Promise<{ id: string; email: string; firstPassword: string }> {
  const { Member } = await import('@/models')
  const email = `added${count}@kilnward.example`
  const owner = await enter(members.owner)
  const { text } = await callAction(owner, '/people', 'addMemberAction', [], { name: `Added ${count}`, email, role })
  const [firstPassword = ''] = FIRST_PASSWORD.exec(text) ?? []
  expect(firstPassword).not.toBe('')
  secrets.push(firstPassword)
  return { id: (await Member.findOne({ where: { email }, rejectOnEmpty: true })).id, email, firstPassword }
}

describe('with a first password', () => {
  it('every page leads to the one where the member makes their own', async () => {
    const { email, firstPassword } = await addByForm('owner')
    const client = await enter({ email, password: firstPassword })
    const pages = DOORS.filter(({ method, who, route }) => method === 'PAGE' && who !== 'anybody' && route !== '/me/password')
    expect(pages.length).toBeGreaterThan(8)
    for (const { route, example } of pages) {
      const response = await client.fetch(example ?? route.replaceAll(/\[[^\]]+\]/g, ANY_ID))
      const text = await response.text()
      const target = response.headers.get('location') ?? /NEXT_REDIRECT;\w+;([^;]+);/.exec(text)?.[1]
      expect(target, route).toBe('/me/password')
    }
    expect((await client.fetch('/me/password')).status).toBe(200)
  })

  it('every route answers 403 with a sentence', async () => {
    const { email, firstPassword } = await addByForm('owner')
    const client = await enter({ email, password: firstPassword })
    const routes = DOORS.filter(({ method, who }) => method !== 'PAGE' && who !== 'anybody' && who !== 'sensor')
    for (const { method, route, example } of routes) {
      const path = example ?? route.replaceAll(/\[[^\]]+\]/g, ANY_ID)
      const response = method === 'GET' ? await client.fetch(path) : await client.send(method, path, {})
      expect(response.status, `${method} ${route}`).toBe(403)
      expect(await response.json()).toMatchObject({
        type: 'urn:kilnward:problem:forbidden',
        detail: 'Make a password of your own first: yours was made by somebody else.',
      })
    }
  })

  it('no action does anything but the one that changes it, and that one opens everything', async () => {
    const { Member } = await import('@/models')
    const { id, email, firstPassword } = await addByForm('owner')
    const client = await enter({ email, password: firstPassword })
    const added = { name: 'Sneaked', email: `sneaked${count}@kilnward.example`, role: 'owner' }
    expect((await callAction(client, '/people', 'addMemberAction', [], added)).status).toBe(500)
    expect(await Member.count({ where: { email: added.email } })).toBe(0)
    await callAction(client, '/me', 'saveUnitsAction', [], { tempUnit: 'degF', massUnit: '', lengthUnit: '' })
    expect((await Member.findByPk(id))?.tempUnit).toBeNull()

    const [copy, elsewhere] = [copyOf(client), await enter({ email, password: firstPassword })]
    secrets.push(NEW_PASSWORD)
    const answer = await callAction(client, '/me/password', 'changePasswordAction', [], {
      currentPassword: firstPassword,
      newPassword: NEW_PASSWORD,
    })
    expect(answer.redirect).toBe('/floor')
    expect((await client.fetch('/people')).status).toBe(200)
    expect((await client.fetch('/api/v1/queue')).status).toBe(200)
    expect([(await copy.fetch('/api/v1/queue')).status, (await elsewhere.fetch('/api/v1/queue')).status]).toEqual([401, 401])
  })

  it('that has run out, says so, but only to who knows it', async () => {
    const { Member } = await import('@/models')
    const { id, email, firstPassword } = await addByForm('operator')
    const client = await enter({ email, password: firstPassword })
    await Member.update({ firstPasswordUntil: Date.now() }, { where: { id } })
    expect((await client.fetch('/api/v1/queue')).status).toBe(401)
    expect((await trySignIn(newClient(server.baseUrl), email, firstPassword)).error).toBe('FIRST_PASSWORD_OVER')
    expect((await trySignIn(newClient(server.baseUrl), email, 'not this one')).error).toBe('CredentialsSignin')
  })
})

/** What ends a session, each through the door that people use. */
const ENDS: Record<string, (client: Client, member: SeededMember) => Promise<unknown>> = {
  'signing out': (client) => signOut(client),
  'being disabled': async (_client, { id }) => callAction(await enter(members.owner), `/people/${id}`, 'disableMemberAction', [id], {}),
  'another role': async (_client, { id, name, email }) =>
    callAction(await enter(members.owner), `/people/${id}`, 'editMemberAction', [id], { name, email, role: 'crew' }),
  'a change of password': (client, { password }) =>
    callAction(client, '/me/password', 'changePasswordAction', [], { currentPassword: password, newPassword: NEW_PASSWORD }),
  'a new first password': async (_client, { id }) =>
    callAction(await enter(members.owner), `/people/${id}`, 'renewFirstPasswordAction', [id], {}),
}

describe('a copied cookie', () => {
  it.each(Object.keys(ENDS))('is refused from the moment of %s, each of fifty times', async (name) => {
    const member = await fresh('supervisor')
    secrets.push(member.password)
    const client = await enter(member)
    const copy = client.cookies.get(COOKIE) ?? ''
    const replay = async (path: string) => (await newClient(server.baseUrl, new Map([[COOKIE, copy]])).fetch(path)).status
    expect([await replay('/api/v1/queue'), await replay('/me')]).toEqual([200, 200])
    await ENDS[name]!(client, member)
    // At once, not a second later.
    const statuses = await Promise.all(Array.from({ length: 25 }, async () => [await replay('/api/v1/queue'), await replay('/me')]))
    expect(statuses.flat().filter((status) => status === 200)).toEqual([])
    expect(new Set(statuses.map(([route]) => route))).toEqual(new Set([401]))
    // The sign-in page says that a session has ended.
    const page = await newClient(server.baseUrl, new Map([[COOKIE, copy]])).fetch('/me')
    expect(page.headers.get('location')).toBe('/sign-in?callbackUrl=%2Fme&ended=1')
  })
})

describe('secrets', () => {
  it('are in no line of the server: passwords right and wrong, first ones, new ones, tokens, cookies', async () => {
    const { Sensor } = await import('@/models')
    const owner = await enter(members.owner)
    const wrong = 'a wrong password that was typed'
    await trySignIn(owner, members.owner.email, wrong)
    const change = { currentPassword: wrong, newPassword: 'a new password never taken' }
    await callAction(owner, '/me/password', 'changePasswordAction', [], change)
    const sensor = await Sensor.findOne({ rejectOnEmpty: true })
    const { text } = await callAction(owner, '/settings/sensors', 'issueTokenAction', [sensor.id])
    const [token = ''] = /kw_[0-9a-f]{16}_[\w-]{43}/.exec(text) ?? []
    expect(token).not.toBe('')
    secrets.push(wrong, change.newPassword, token, ...owner.cookies.values())
    const output = server.output()
    expect(output).toContain('sign-in.done')
    expect(secrets.length).toBeGreaterThan(12)
    for (const secret of secrets) expect(output.includes(secret), `${secret.slice(0, 6)}… is in the log`).toBe(false)
  })
})

// Last: it uses up what strangers have for a minute.
describe('a device', () => {
  it('from which a member has signed in before is not kept out by strangers who use up their allowance, and is nobody else’s', async () => {
    const known = await enter(members.crew)
    const line = (await trySignIn(known, members.crew.email, members.crew.password)).setCookies.find((cookie) =>
      cookie.startsWith('kilnward-device='),
    )
    expect(line).toMatch(/; HttpOnly/i)
    expect(line).toMatch(/; SameSite=Lax/i)
    expect(line).toMatch(/; Max-Age=31536000/i)
    const stranger = newClient(server.baseUrl)
    // Waits of the e-mail come after five; each try counts for the strangers all the same.
    for (let tries = 0; tries < 61; tries += 1) await trySignIn(stranger, 'flood@kilnward.example', 'wrong')
    expect((await trySignIn(newClient(server.baseUrl), members.operator.email, members.operator.password)).error).toMatch(/^WAIT:\d+$/)
    expect((await trySignIn(known, members.crew.email, members.crew.password)).status).toBe(200)
    // A colleague's device is a stranger's: who has an own password must not try another's without end.
    expect((await trySignIn(known, members.operator.email, members.operator.password)).error).toMatch(/^WAIT:\d+$/)
    const [id = ''] = known.cookies.get('kilnward-device')?.split('.') ?? []
    expect(id).toHaveLength(22)
    const forged = newClient(server.baseUrl, new Map([['kilnward-device', `${id}.${'A'.repeat(43)}`]]))
    expect((await trySignIn(forged, members.operator.email, members.operator.password)).error).toMatch(/^WAIT:\d+$/)
  })
})
