import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { newClient, signIn, trySignIn, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

let server: TestServer
let stranger: Client

beforeAll(async () => {
  server = await startServer()
  stranger = newClient(server.baseUrl)
})
afterAll(() => server.stop())

/** Where a page leads; null when it answers itself. */
async function leadsTo(client: Client, path: string): Promise<string | null> {
  const response = await client.fetch(path)
  const target = response.headers.get('location') ?? /NEXT_REDIRECT;\w+;([^;]+);/.exec(await response.text())?.[1]
  return target ? new URL(target, client.baseUrl).pathname : null
}

// In this order: records in which nobody is a member, then one owner, then a foundry that is set up.
describe('while nobody is a member', () => {
  it.each(['/sign-in', '/floor', '/trees', '/settings', '/people'])('%s leads to the first run', async (path) => {
    expect(await leadsTo(stranger, path)).toBe('/first-run')
  })

  it('the first run asks for the owner’s account, and for no code on this machine alone', async () => {
    const page = await (await stranger.fetch('/first-run')).text()
    expect(page).toContain('Make the owner’s account')
    expect(page).not.toContain('Setup code')
  })

  it.each([
    ['GET', '/api/v1/queue', undefined],
    ['POST', '/api/v1/dips', {}],
    ['POST', '/api/v1/readings', { readings: [] }],
  ])('%s %s says that there is nothing to work on yet', async (method, path, body) => {
    const response = method === 'GET' ? await stranger.fetch(path) : await stranger.send(method, path, body)
    expect(response.status).toBe(503)
    expect(response.headers.get('content-type')).toBe('application/problem+json')
    expect(await response.json()).toMatchObject({
      type: 'urn:kilnward:problem:unavailable',
      detail: expect.stringMatching(/not set up yet/),
    })
  })

  it('the health door still answers', async () => {
    expect((await stranger.fetch('/api/health')).status).toBe(200)
  })

  it('nobody signs in', async () => {
    expect((await trySignIn(stranger, 'tobias@marramlane.example', 'gull-on-a-post-seven')).error).toBe('CredentialsSignin')
  })
})

describe('until the first run is ended', () => {
  let owner: Client
  let supervisor: Client
  beforeAll(async () => {
    const { makeFirstOwner } = await import('@/lib/commands/make-first-owner')
    const ada = { name: 'Ada', email: 'ada@kilnward.example', password: 'a hare and two otters', setupCode: '', timeZone: 'Europe/Rome' }
    // The command is the server's own; here it runs beside it, on the same records.
    const env = {
      NEXTAUTH_SECRET: 'what this file alone knows, and long enough',
      NEXTAUTH_URL: server.baseUrl,
      UV_THREADPOOL_SIZE: '16',
      VAPID_SUBJECT: 'mailto:a@b.example',
    }
    Object.assign(process.env, env, { VAPID_PUBLIC_KEY: 'B'.repeat(87), VAPID_PRIVATE_KEY: 'k'.repeat(43) })
    await makeFirstOwner(ada, { userAgent: '', clock: { now: () => Date.now() }, scryptCost: 16 })
    owner = await signIn(server.baseUrl, ada.email, ada.password)
    const sue = await seedMember('supervisor')
    supervisor = await signIn(server.baseUrl, sue.email, sue.password)
  })

  it('a stranger is led to the sign-in, and never again to another owner’s account', async () => {
    expect(await leadsTo(stranger, '/floor')).toBe('/sign-in')
    expect(await leadsTo(stranger, '/first-run')).toBe('/floor')
    expect(await leadsTo(stranger, '/sign-in')).toBeNull()
  })

  it('the owner is led to the first step that is not ended, from everywhere', async () => {
    for (const path of ['/floor', '/trees', '/settings', '/upkeep']) expect(await leadsTo(owner, path)).toBe('/first-run')
    expect(await (await owner.fetch('/first-run')).text()).toContain('Your foundry</h1>')
    // A step that has not been reached is not open yet.
    expect(await (await owner.fetch('/first-run?step=places')).text()).toContain('Your foundry</h1>')
  })

  it('everybody else reads that the owner is setting up', async () => {
    expect(await leadsTo(supervisor, '/floor')).toBe('/first-run')
    expect(await (await supervisor.fetch('/first-run')).text()).toContain('The owner is setting up the foundry')
  })

  it('afterwards it leads to the floor', async () => {
    const { Foundry } = await import('@/models')
    await Foundry.update({ setUpAt: Date.now() }, { where: { id: 1 } })
    for (const client of [owner, supervisor, stranger]) expect(await leadsTo(client, '/first-run')).toBe('/floor')
    expect(await leadsTo(supervisor, '/floor')).toBeNull()
  })
})

describe('where others can reach the server', () => {
  it('the first run asks for the code of this start', async () => {
    const open = await startServer({ env: { SETUP_CODE: 'ABCD-EFGH-JKMN' } })
    try {
      expect(await (await newClient(open.baseUrl).fetch('/first-run')).text()).toContain('Setup code')
    } finally {
      await open.stop()
    }
  })
})
