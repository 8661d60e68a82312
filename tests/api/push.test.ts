import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import type { Role } from '@/lib/members/roles'
import type { Client } from '@/tests/setup/client'
import { startFakePushService, type FakePushService } from '@/tests/setup/fake-push-service'
import { seedMembers, signInAll, startServer, testEnv, type TestServer } from '@/tests/setup/server'

let service: FakePushService
let server: TestServer
let clients: Record<Role | 'anonymous', Client>
const vapidPublicKey = String(testEnv('')['VAPID_PUBLIC_KEY'])

beforeAll(async () => {
  service = await startFakePushService()
  server = await startServer({ env: { PUSH_EXTRA_HOSTS: service.host, PUSH_CA_FILE: service.caFile } })
  clients = await signInAll(server.baseUrl, await seedMembers())
})
afterAll(async () => {
  await server.stop()
  await service.stop()
})

const ADDRESS = '/api/v1/push/subscriptions'
const bodyOf = (device: { endpoint: string; keys: { p256dh: string; auth: string } }, rest: object = {}) => ({
  endpoint: device.endpoint,
  keys: device.keys,
  vapidPublicKey,
  scope: 'every tree',
  label: 'Firefox on Android',
  ...rest,
})
const listOf = async (client: Client): Promise<unknown> => (await client.fetch(ADDRESS)).json()

describe('devices of a member', () => {
  it('are turned on, renewed, tested and turned off, each member’s own', async () => {
    const device = service.subscribe(vapidPublicKey)
    expect((await clients.crew.send('POST', ADDRESS, bodyOf(device))).status).toBe(201)
    expect((await clients.crew.send('POST', ADDRESS, bodyOf(device, { scope: 'watched trees' }))).status).toBe(200)
    const list = await listOf(clients.crew)
    expect(list).toMatchObject({
      publicKey: vapidPublicKey,
      devices: [{ label: 'Firefox on Android', scope: 'watched trees', isOutdated: false }],
    })
    expect(JSON.stringify(list)).not.toContain(device.endpoint)
    expect(await listOf(clients.operator)).toMatchObject({ devices: [] })

    const test = { endpoint: device.endpoint }
    expect((await clients.operator.send('POST', '/api/v1/push/test', test)).status).toBe(404)
    expect(await (await clients.crew.send('POST', '/api/v1/push/test', test)).json()).toMatchObject({ isSent: true })
    expect(device.received.map(({ text }) => text)).toEqual([expect.stringContaining('Kilnward test')])
    device.mode = '403'
    const refused = await (await clients.crew.send('POST', '/api/v1/push/test', test)).text()
    expect(refused).toContain('does not accept the keys of this server')
    expect(refused).not.toContain('BadJwtToken')

    expect((await clients.operator.send('DELETE', ADDRESS, test)).status).toBe(204)
    expect(await listOf(clients.crew)).toMatchObject({ devices: [{ lastError: expect.any(String) }] })
    expect((await clients.crew.send('DELETE', ADDRESS, test)).status).toBe(204)
    expect(await listOf(clients.crew)).toMatchObject({ devices: [] })
  })

  it('move to the member who signs in on the same browser', async () => {
    const device = service.subscribe(vapidPublicKey)
    await clients.crew.send('POST', ADDRESS, bodyOf(device))
    expect((await clients.supervisor.send('POST', ADDRESS, bodyOf(device))).status).toBe(201)
    expect(await listOf(clients.crew)).toMatchObject({ devices: [] })
    expect(await listOf(clients.supervisor)).toMatchObject({ devices: [{ scope: 'every tree' }] })
  })

  it('are ten at most', async () => {
    const answers = []
    for (let n = 0; n < 11; n += 1) {
      answers.push((await clients.owner.send('POST', ADDRESS, bodyOf(service.subscribe(vapidPublicKey)))).status)
    }
    expect(answers).toEqual([...Array.from({ length: 10 }, () => 201), 409])
  })

  it('are refused where no browser would be', async () => {
    const { keys, endpoint } = service.subscribe(vapidPublicKey)
    const wrong = [
      bodyOf({ keys, endpoint: 'https://169.254.169.254/latest/meta-data' }),
      bodyOf({ keys, endpoint: endpoint.replace('https', 'http') }),
      bodyOf({ keys, endpoint: 'https://user@fcm.googleapis.com/x' }),
      bodyOf({ keys: { ...keys, auth: 'c2hvcnQ' }, endpoint }),
      bodyOf({ keys: { ...keys, p256dh: keys.auth }, endpoint }),
      bodyOf({ keys, endpoint }, { vapidPublicKey: keys.p256dh }),
      bodyOf({ keys, endpoint }, { scope: 'all' }),
      bodyOf({ keys, endpoint }, { memberId: crypto.randomUUID() }),
      [],
    ]
    const answers = []
    for (const body of wrong) answers.push((await clients.operator.send('POST', ADDRESS, body)).status)
    expect(answers).toEqual(wrong.map(() => 422))
    expect(await listOf(clients.operator)).toMatchObject({ devices: [] })
  })

  it('are tested six times a minute at most', async () => {
    const device = service.subscribe(vapidPublicKey)
    await clients.supervisor.send('POST', ADDRESS, bodyOf(device))
    const answers = []
    for (let n = 0; n < 7; n += 1) {
      answers.push((await clients.supervisor.send('POST', '/api/v1/push/test', { endpoint: device.endpoint })).status)
    }
    expect(answers).toEqual([200, 200, 200, 200, 200, 200, 429])
  })
})

describe('watching a tree', () => {
  it('needs a tree, and ends without complaint', async () => {
    const address = `/api/v1/trees/${crypto.randomUUID()}/watch`
    expect((await clients.crew.fetch(address, { method: 'POST' })).status).toBe(404)
    expect((await clients.crew.fetch(address, { method: 'DELETE' })).status).toBe(204)
  })
})

describe('the service worker', () => {
  it('is asked for anew at every visit', async () => {
    const response = await clients.anonymous.fetch('/sw.js')
    expect(response.status).toBe(200)
    expect(response.headers.get('cache-control')).toBe('no-cache')
    expect(response.headers.get('content-type')).toMatch(/javascript/)
  })
})
