import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DOORS } from '@/tests/api/authorisation-table'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

let server: TestServer
let owner: Client
/** Asked for by name, which an answer may repeat; the other one is data. */
let tree: { id: string; tag: string }
let other: { tag: string }

beforeAll(async () => {
  server = await startServer()
  const { buildFoundry, buildTree } = await import('@/tests/factories/shell-room')
  const foundry = await buildFoundry()
  tree = await buildTree(foundry)
  other = await buildTree(foundry)
  const { email, password } = await seedMember('owner')
  owner = await signIn(server.baseUrl, email, password)
})
afterAll(() => server.stop())

const SECURITY = [
  'content-security-policy',
  'cross-origin-opener-policy',
  'cross-origin-resource-policy',
  'permissions-policy',
  'referrer-policy',
  'strict-transport-security',
  'x-content-type-options',
  'x-frame-options',
  'x-powered-by',
]

/** The headers that matter, with the nonce of this answer left out. */
function securityOf({ headers }: Response): Record<string, string> {
  const present = SECURITY.flatMap((name) => {
    const value = headers.get(name)
    return value === null ? [] : [[name, value.replaceAll(/'nonce-[A-Za-z0-9+/=]{24}'/g, "'nonce'")]]
  })
  return Object.fromEntries(present) as Record<string, string>
}

const EVERYWHERE = {
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
  'permissions-policy': 'camera=(), microphone=(), geolocation=(), payment=(), usb=(), screen-wake-lock=(self)',
  'referrer-policy': 'same-origin',
  'x-content-type-options': 'nosniff',
  'x-frame-options': 'DENY',
}
const PAGE = {
  ...EVERYWHERE,
  'content-security-policy':
    "default-src 'self'; script-src 'self' 'nonce' 'strict-dynamic'; style-src-elem 'self' 'nonce'; style-src-attr 'unsafe-inline'; " +
    "style-src 'self' 'unsafe-inline'; img-src 'self' data: blob:; font-src 'self'; connect-src 'self'; worker-src 'self'; " +
    "manifest-src 'self'; frame-src 'none'; object-src 'none'; base-uri 'none'; form-action 'self'; frame-ancestors 'none'",
}
const NOT_A_PAGE = {
  ...EVERYWHERE,
  'content-security-policy': "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; form-action 'none'; frame-ancestors 'none'",
}

describe('an answer carries the headers of its kind:', () => {
  it.each([
    ['a page', '/sign-in', 200],
    ['a page for members', '/floor', 200],
    ['a page that leads elsewhere', '/', 307],
    ['a page that is not there', '/nowhere/at/all', 404],
  ])('%s', async (_kind, path, status) => {
    const response = await owner.fetch(path)
    expect(response.status).toBe(status)
    expect(securityOf(response)).toEqual(PAGE)
  })

  it('a page that sends to the sign-in', async () => {
    const response = await newClient(server.baseUrl).fetch('/trees')
    expect(response.status).toBe(307)
    expect(securityOf(response)).toEqual(PAGE)
  })

  it.each([
    ['an answer of the API', '/api/health', 200],
    ['a refusal', '/api/v1/no/such/door', 404],
    ['the API to a member', '/api/v1/queue', 200],
    ['next-auth', '/api/auth/session', 200],
    ['the manifest', '/manifest.webmanifest', 200],
    ['a picture', '/icons/icon.svg', 200],
    ['the icon that a browser asks for by itself', '/favicon.ico', 200],
  ])('%s', async (_kind, path, status) => {
    const response = await owner.fetch(path)
    expect(response.status).toBe(status)
    expect(securityOf(response)).toEqual(NOT_A_PAGE)
  })

  it('the service worker, whose policy lets it ask the API', async () => {
    const response = await owner.fetch('/sw.js')
    expect(securityOf(response)).toEqual({
      ...NOT_A_PAGE,
      'content-security-policy': `${NOT_A_PAGE['content-security-policy']}; connect-src 'self'`,
    })
  })

  it('a page and a door that fail', async () => {
    const { database } = await import('@/models')
    await database.query('ALTER TABLE sessions RENAME TO sessions_away')
    try {
      const [page, door] = [await owner.fetch('/floor'), await owner.fetch('/api/v1/queue')]
      expect([page.status, door.status]).toEqual([500, 500])
      expect(securityOf(page)).toEqual(PAGE)
      expect(securityOf(door)).toEqual(NOT_A_PAGE)
    } finally {
      await database.query('ALTER TABLE sessions_away RENAME TO sessions')
    }
  })
})

describe('an answer is packed once', () => {
  it.each(['/api/v1/queue', '/api/v1/openapi.json', '/floor'])('%s', async (path) => {
    const [plain, packed] = await Promise.all(
      ['identity', 'gzip, deflate, br'].map((encoding) => owner.fetch(path, { headers: { 'accept-encoding': encoding } })),
    )
    expect(packed!.headers.get('content-encoding')).toMatch(/^(?:gzip|br)$/)
    const start = (await plain!.text()).slice(0, 5)
    expect((await packed!.text()).slice(0, 5)).toBe(start)
    expect(start).toMatch(/^[{<]/)
  })
})

describe('the nonce', () => {
  it('is another one for each answer, and on every script and style sheet of a page', async () => {
    const nonces = new Set<string>()
    for (const path of ['/sign-in', '/floor', '/trees', '/nowhere']) {
      const response = await owner.fetch(path)
      const [, nonce = ''] = /'nonce-([^']+)'/.exec(response.headers.get('content-security-policy') ?? '') ?? []
      expect(nonce).toMatch(/^[A-Za-z0-9+/=]{24}$/)
      nonces.add(nonce)
      const html = await response.text()
      const tags = [...html.matchAll(/<(?:script|style)\b[^>]*>|<link\b[^>]*rel="stylesheet"[^>]*>/g)].map(([tag]) => tag)
      expect(tags.length).toBeGreaterThan(3)
      expect(tags.filter((tag) => !tag.includes(`nonce="${nonce}"`))).toEqual([])
    }
    expect(nonces.size).toBe(4)
  })

  it('is not one that the client sends', async () => {
    const response = await owner.fetch('/sign-in', { headers: { 'content-security-policy': "script-src 'nonce-mine'", 'x-nonce': 'mine' } })
    expect(response.headers.get('content-security-policy')).not.toContain('mine')
    expect(await response.text()).not.toContain('nonce="mine"')
  })
})

// Conditions by which matchers of a proxy are often skipped.
const SKIPS: Record<string, string>[] = [
  { 'next-router-prefetch': '1' },
  { purpose: 'prefetch' },
  { 'sec-purpose': 'prefetch' },
  { rsc: '1' },
  { rsc: '1', 'next-router-prefetch': '1', 'next-router-segment-prefetch': '/_tree' },
  { 'x-middleware-subrequest': 'proxy:proxy:proxy:proxy:proxy' },
  { 'x-middleware-prefetch': '1' },
  { 'x-nextjs-data': '1' },
]
const guarded = DOORS.filter(({ who, method }) => who !== 'anybody' && (method === 'GET' || method === 'PAGE'))

describe.each(SKIPS)('a stranger who sends %j', (headers) => {
  it('gets no data from any page or door', async () => {
    const stranger = newClient(server.baseUrl)
    for (const { route, example } of guarded) {
      const response = await stranger.fetch((example ?? route).replaceAll(/\[[^\]]+\]/g, tree.id).replace('KW-1', tree.tag), { headers })
      const text = await response.text()
      expect(text, route).not.toContain(other.tag)
      expect(text, route).not.toContain('Test foundry')
      expect(text, route).not.toContain('Olga Owner')
      expect([200, 204, 304, 307, 401, 404], route).toContain(response.status)
    }
  })

  it('still gets a policy with every page', async () => {
    const response = await newClient(server.baseUrl).fetch('/sign-in', { headers })
    expect(response.headers.get('content-security-policy')).toContain("'strict-dynamic'")
  })
})

it('https: browsers are told to stay with it; http: they are not', async () => {
  expect((await owner.fetch('/sign-in')).headers.has('strict-transport-security')).toBe(false)
  const secure = await startServer({ env: { NEXTAUTH_URL: 'https://shellroom.example' } })
  try {
    const { headers } = await newClient(secure.baseUrl).fetch('/sign-in')
    expect(headers.get('strict-transport-security')).toBe('max-age=63072000')
    expect(headers.get('content-security-policy')).toContain('upgrade-insecure-requests')
  } finally {
    await secure.stop()
    process.env['DATA_DIR'] = server.dataDir
  }
})
