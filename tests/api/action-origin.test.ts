import { readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { z } from 'zod'
import type * as Factories from '@/tests/factories/shell-room'
import type { Client } from '@/tests/setup/client'
import { seedMembers, signInAll, startServer, type TestServer } from '@/tests/setup/server'

let server: TestServer
let clients: Awaited<ReturnType<typeof signInAll>>
let factories: typeof Factories
let foundry: Factories.TestFoundry

beforeAll(async () => {
  server = await startServer()
  factories = await import('@/tests/factories/shell-room')
  foundry = await factories.buildFoundry()
  clients = await signInAll(server.baseUrl, await seedMembers())
})
afterAll(() => server.stop())

/** The id under which the build knows a server action. */
function actionId(name: string): string {
  const manifest = z.looseObject({ node: z.record(z.string(), z.looseObject({ exportedName: z.string() })) })
  const file = join(import.meta.dirname, '../../.next/server/server-reference-manifest.json')
  const { node } = manifest.parse(JSON.parse(readFileSync(file, 'utf8')))
  return Object.entries(node).find(([, { exportedName }]) => exportedName === name)?.[0] ?? ''
}

/** Holds a tree through the form's server action, as the browser code of the page sends it. */
async function hold(client: Client, headers: Record<string, string>): Promise<{ status: number; isHeld: boolean }> {
  const { Hold } = await import('@/models')
  const { id, tag } = await factories.buildTree(foundry)
  const body = new FormData()
  body.append('_1_reason', 'Crack at the cup')
  body.append('0', JSON.stringify([id, { status: 'idle' }, '$K1']))
  const cookie = [...client.cookies].map(([name, value]) => `${name}=${value}`).join('; ')
  const response = await fetch(`${server.baseUrl}/trees/${tag}`, {
    method: 'POST',
    headers: { cookie, 'next-action': actionId('holdAction'), accept: 'text/x-component', ...headers },
    body,
    redirect: 'manual',
  })
  expect(await response.text()).not.toMatch(/\n\s+at |node_modules/)
  return { status: response.status, isHeld: (await Hold.count({ where: { treeId: id } })) === 1 }
}

describe('a server action', () => {
  it('runs for a page of our own and a member with the right', async () => {
    expect(await hold(clients.operator, { origin: server.baseUrl })).toEqual({ status: 200, isHeld: true })
  })

  it.each([
    ['a foreign Origin', { origin: 'http://evil.example' }],
    ['another port', { origin: 'http://127.0.0.1:1' }],
    ['the Origin null', { origin: 'null' }],
    ['a foreign Origin that names us as the host', { origin: 'http://evil.example', 'x-forwarded-host': '127.0.0.1' }],
  ])('does nothing for %s', async (_name, headers) => {
    const { status, isHeld } = await hold(clients.owner, headers)
    expect(isHeld).toBe(false)
    expect(status).toBeGreaterThanOrEqual(400)
  })

  // No browser leaves it out: what remains is a program, which must have the session and the right like any other.
  it.each([
    ['a stranger', 'anonymous', false],
    ['a member without the right', 'crew', false],
    ['a member with the right', 'operator', true],
  ] as const)('without an Origin runs for %s: %s', async (_name, visitor, runs) => {
    expect((await hold(clients[visitor], {})).isHeld).toBe(runs)
  })
})
