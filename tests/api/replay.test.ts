import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DOORS, type Door } from '@/tests/api/authorisation-table'
import { newClient, signIn, signOut, type Client } from '@/tests/setup/client'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

const ANY_ID = '018f7d1e-7c00-7000-8000-000000000000'

let server: TestServer

beforeAll(async () => {
  server = await startServer()
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  await buildFoundry()
})
afterAll(() => server.stop())

const guarded = DOORS.filter(({ who }) => who !== 'anybody' && who !== 'sensor')

/** Whether the door lets this cookie in; a page that leads elsewhere does not. */
async function isLetIn(client: Client, { method, route, example }: Door): Promise<boolean> {
  const path = example ?? route.replaceAll(/\[[^\]]+\]/g, ANY_ID)
  const response = method === 'PAGE' || method === 'GET' ? await client.fetch(path) : await client.send(method, path, {})
  const text = await response.text()
  return ![401, 403, 307].includes(response.status) && !/NEXT_REDIRECT;\w+;\/(?:sign-in|floor)/.test(text)
}

async function letIn(client: Client, doors: readonly Door[]): Promise<string[]> {
  const open: string[] = []
  for (const door of doors) {
    if (await isLetIn(newClient(client.baseUrl, new Map(client.cookies)), door)) open.push(`${door.method} ${door.route}`)
  }
  return open
}

let count = 0
async function enter(role: 'owner' | 'supervisor') {
  count += 1
  const member = await seedMember(role, { email: `replay-${count}@kilnward.example` })
  return { member, client: await signIn(server.baseUrl, member.email, member.password) }
}

/** A copy of the cookies as they are now, in another browser. */
const saved = ({ baseUrl, cookies }: Client) => newClient(baseUrl, new Map(cookies))

describe('a saved cookie opens nothing', () => {
  it('after signing out', async () => {
    const { client } = await enter('owner')
    const copy = saved(client)
    expect(await letIn(copy, guarded)).not.toEqual([])
    await signOut(client)
    expect(await letIn(copy, guarded)).toEqual([])
  })

  it('after the member was disabled', async () => {
    const { Member } = await import('@/models')
    const { member, client } = await enter('owner')
    const copy = saved(client)
    await Member.update({ disabledAt: Date.now() }, { where: { id: member.id } })
    expect(await letIn(copy, guarded)).toEqual([])
  })

  it('that the new role may not open', async () => {
    const { Member } = await import('@/models')
    const { member, client } = await enter('supervisor')
    const copy = saved(client)
    const lost = guarded.filter(({ who }) => who !== 'crew')
    expect(lost.length).toBeGreaterThan(5)
    await Member.update({ role: 'crew' }, { where: { id: member.id } })
    expect(await letIn(copy, lost)).toEqual([])
  })

  it('not even in the second after it, however many ask at once', async () => {
    const { Member } = await import('@/models')
    const { member, client } = await enter('supervisor')
    const copy = saved(client)
    await Member.update({ disabledAt: Date.now() }, { where: { id: member.id } })
    const until = performance.now() + 1000
    const statuses = new Set<number>()
    while (performance.now() < until) {
      const answers = await Promise.all(Array.from({ length: 8 }, () => copy.fetch('/api/v1/queue')))
      for (const { status } of answers) statuses.add(status)
    }
    expect([...statuses]).toEqual([401])
  })
})
