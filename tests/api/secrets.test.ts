import { readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, expect, it } from 'vitest'
import { DOORS } from '@/tests/api/authorisation-table'
import { signIn, trySignIn, newClient, type Client } from '@/tests/setup/client'
import { seedMember, startServer, startWorker, testEnv, type Program, type SeededMember, type TestServer } from '@/tests/setup/server'

const root = join(import.meta.dirname, '../..')

let server: TestServer
let worker: Program
let member: SeededMember
let client: Client
let token: string

beforeAll(async () => {
  server = await startServer()
  worker = startWorker(server.dataDir)
  const { buildFoundry } = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const foundry = await buildFoundry()
  member = await seedMember('owner')
  client = await signIn(server.baseUrl, member.email, member.password)
  ;({ token } = await issueSensorToken({ sensorId: foundry.sensorId }, { member, clock: { now: () => Date.now() } }))
})
afterAll(() => Promise.all([server.stop(), worker.stop()]))

/** Secrets of the tests, and those that this checkout has made for itself. */
function knownSecrets(): string[] {
  const env = testEnv('')
  const own = ['data/secrets.json', '.env'].flatMap((name) => {
    try {
      const text = readFileSync(join(root, name), 'utf8')
      return [...text.matchAll(/(?:NEXTAUTH_SECRET|VAPID_PRIVATE_KEY)["']?\s*[:=]\s*["']?([\w+/=-]{20,})/g)].map(([, value = '']) => value)
    } catch {
      return []
    }
  })
  return [env['NEXTAUTH_SECRET'] ?? '', env['VAPID_PRIVATE_KEY'] ?? '', ...own]
}

it('the build holds no secret, on the server or for the browser', () => {
  const files = readdirSync(join(root, '.next'), { recursive: true, withFileTypes: true })
    .filter((entry) => entry.isFile() && !/\/\.next\/(?:cache|dev)(?:\/|$)/.test(entry.parentPath))
    .map((entry) => join(entry.parentPath, entry.name))
  expect(files.length).toBeGreaterThan(100)
  const secrets = knownSecrets()
  expect(secrets.every((secret) => secret.length >= 20)).toBe(true)
  const holding = files.filter((file) => {
    const bytes = readFileSync(file)
    return secrets.some((secret) => bytes.includes(secret))
  })
  expect(holding).toEqual([])
})

it('no secret, password, cookie or token comes into the log or into an answer', async () => {
  const stranger = newClient(server.baseUrl)
  await trySignIn(stranger, member.email, 'a-wrong-password-of-mine')
  const bearer = (value: string) => ({ authorization: `Bearer ${value}`, 'content-type': 'application/json' })
  const sent = { measuredAt: Date.now(), airTempC: 21, relHumidityPct: 50 }
  const body = JSON.stringify({ readings: [sent] })
  expect((await stranger.fetch('/api/v1/readings', { method: 'POST', headers: bearer(token), body })).status).toBe(200)
  await stranger.fetch('/api/v1/readings', { method: 'POST', headers: bearer(`${token.slice(0, -4)}AAAA`), body })
  const cookie = client.cookies.get('next-auth.session-token') ?? ''
  const secrets = [...knownSecrets(), member.password, 'a-wrong-password-of-mine', token, cookie]
  const { database } = await import('@/models')

  const answers: string[] = []
  const ask = async () => {
    for (const { method, route, example } of DOORS.filter((door) => door.method === 'PAGE' || door.method === 'GET')) {
      const response = await client.fetch(example ?? route.replaceAll(/\[[^\]]+\]/g, 'KW-1'))
      answers.push(`${method} ${route} ${await response.text()}`)
    }
  }
  await ask()
  // The same with a fault behind every door: that is where a log likes to tell too much.
  await database.query('ALTER TABLE members RENAME TO members_away')
  await ask()
  await trySignIn(stranger, member.email, member.password)
  await database.query('ALTER TABLE members_away RENAME TO members')

  const told = (text: string) => secrets.filter((secret) => text.includes(secret)).map((secret) => secret.slice(0, 6))
  expect(server.output()).toContain('no such table')
  expect(told(server.output())).toEqual([])
  expect(told(worker.output())).toEqual([])
  expect(answers.filter((answer) => told(answer).length > 0).map((answer) => answer.slice(0, 60))).toEqual([])
}, 120_000)
