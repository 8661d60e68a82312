import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { may, ROLE_ORDER, type Role } from '@/lib/members/roles'
import { ACTIONS, DOORS, type Door, type Who } from '@/tests/api/authorisation-table'
import { builtActions, builtDoors, sourceOf } from '@/tests/setup/build'
import type { Client } from '@/tests/setup/client'
import { seedMembers, signInAll, startServer, type TestServer } from '@/tests/setup/server'

const VISITORS = ['anonymous', ...ROLE_ORDER] as const
const ANY_ID = '018f7d1e-7c00-7000-8000-000000000000'

const addressOf = ({ route, example }: Door) => example ?? route.replaceAll(/\[[^\]]+\]/g, ANY_ID)

function expected(who: Who, visitor: 'anonymous' | Role): 'in' | 'sign in first' | 'not yours' {
  if (who === 'anybody') return 'in'
  if (visitor === 'anonymous' || who === 'sensor') return 'sign in first'
  return ROLE_ORDER.indexOf(visitor) >= ROLE_ORDER.indexOf(who) ? 'in' : 'not yours'
}

/** A page redirects by status, or by a line in the stream when its loading state was sent already. */
async function openPage(client: Client, { who }: Door, path: string): Promise<string> {
  const response = await client.fetch(path)
  const text = await response.text()
  const target = response.headers.get('location') ?? /NEXT_REDIRECT;\w+;([^;]+);/.exec(text)?.[1]
  if (response.status >= 400 && response.status !== 404) return `status ${response.status}`
  if (!target) return 'in'
  const { pathname } = new URL(target, client.baseUrl)
  if (pathname === '/sign-in') return 'sign in first'
  // An open page may lead to the floor; from any other that is the way out.
  return pathname === '/floor' && who !== 'anybody' ? 'not yours' : 'in'
}

async function callRoute(client: Client, { method }: Door, path: string): Promise<string> {
  const { status } = method === 'GET' ? await client.fetch(path) : await client.send(method, path, {})
  if (status === 401) return 'sign in first'
  if (status === 403) return 'not yours'
  return status >= 500 && !path.startsWith('/api/health') ? `status ${status}` : 'in'
}

describe('the authorisation table', () => {
  it('has a row for every page and every method of every route, and for nothing else', () => {
    const rows = DOORS.map(({ method, route }) => `${method} ${route}`)
    expect(rows.toSorted()).toEqual(builtDoors().toSorted())
  })

  it('has a row for every server action, and for nothing else', () => {
    const rows = ACTIONS.map(({ file, name }) => `${file} ${name}`)
    expect(rows.toSorted()).toEqual(
      builtActions()
        .map(({ file, name }) => `${file} ${name}`)
        .toSorted(),
    )
  })
})

/** What a server action does first, as written. */
function firstLineOf({ file, name }: { file: string; name: string }): string {
  const [, body = ''] = sourceOf(file).split(new RegExp(String.raw`export async function ${name}\b`))
  const end = body.search(/\{\s*\n/)
  return (
    body
      .slice(end + 1)
      .trim()
      .split('\n')[0] ?? ''
  )
}

it('each server action begins with the right that the table names', () => {
  for (const row of ACTIONS) {
    const guard = row.act === null ? 'await requireNobody()' : `await requireMember('${row.act}')`
    expect(firstLineOf(row).replace(/^const \w+ = /, ''), `${row.name} in ${row.file}`).toBe(guard)
  }
  for (const { act, who } of ACTIONS.filter((row) => row.act !== null)) {
    expect(ROLE_ORDER.filter((role) => may(role, act))).toEqual(ROLE_ORDER.slice(ROLE_ORDER.indexOf(who)))
  }
})

describe('each door, for each visitor', () => {
  let server: TestServer
  let clients: Record<(typeof VISITORS)[number], Client>
  beforeAll(async () => {
    server = await startServer()
    const { buildFoundry } = await import('@/tests/factories/shell-room')
    await buildFoundry()
    clients = await signInAll(server.baseUrl, await seedMembers())
  })
  afterAll(() => server.stop())

  describe.each(DOORS.map((door) => ({ ...door, door })))('$method $route', ({ door, method, who }) => {
    it.each(VISITORS)('%s', async (visitor) => {
      const client = clients[visitor]
      const path = addressOf(door)
      const seen = method === 'PAGE' ? await openPage(client, door, path) : await callRoute(client, door, path)
      expect(seen).toBe(expected(who, visitor))
    })
  })

  const writes = DOORS.filter(({ method, who }) => method !== 'PAGE' && method !== 'GET' && who !== 'sensor')
  const FOREIGN: Record<string, Record<string, string>> = {
    'no Origin': { origin: '' },
    'a foreign Origin': { origin: 'http://evil.example' },
    'the Origin null': { origin: 'null' },
    'another port as Origin': { origin: 'http://127.0.0.1:1' },
    'a cross-site mark': { 'sec-fetch-site': 'cross-site' },
    'a same-site mark': { 'sec-fetch-site': 'same-site' },
  }
  describe.each(writes.map((door) => ({ ...door, door })))('$method $route refuses', ({ door, method }) => {
    it.each(Object.entries(FOREIGN))('%s', async (_name, foreign) => {
      const { baseUrl, cookies } = clients.owner
      const headers: Record<string, string> = {
        cookie: [...cookies].map(([name, value]) => `${name}=${value}`).join('; '),
        'content-type': 'application/json',
        origin: baseUrl,
        ...foreign,
      }
      if (headers['origin'] === '') delete headers['origin']
      const response = await fetch(`${baseUrl}${addressOf(door)}`, { method, headers, body: '{}', redirect: 'manual' })
      expect(response.status).toBe(403)
      expect(response.headers.get('content-type')).toBe('application/problem+json')
    })
  })

  const bodies = writes.filter(({ who }) => who !== 'anybody')
  it.each(bodies)('$method $route refuses a body that is not JSON', async (door) => {
    const response = await clients.owner.fetch(addressOf(door), {
      method: door.method,
      headers: { 'content-type': 'text/plain' },
      body: '{}',
    })
    expect(response.status).toBe(415)
  })
})
