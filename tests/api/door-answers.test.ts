import addFormats from 'ajv-formats'
import { Ajv2020 } from 'ajv/dist/2020'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { DESCRIBED_DOORS } from '@/lib/server/doors/all'
import { openApiDocument, type OpenApiDocument } from '@/lib/server/open-api'
import { newClient, signIn, type Client } from '@/tests/setup/client'
import { SCENES, type Scene } from '@/tests/setup/door-scenes'
import { startFakePushService } from '@/tests/setup/fake-push-service'
import { seedMember, startServer, type TestServer } from '@/tests/setup/server'

let server: TestServer
let document: OpenApiDocument
let scene: Scene
let stopService: () => Promise<void>

/** Statuses that each door has given, and what of its answers the description does not know. */
const seen = new Map<string, Set<number>>()
const misfits: string[] = []

beforeAll(async () => {
  const service = await startFakePushService()
  stopService = service.stop
  server = await startServer({ env: { PUSH_EXTRA_HOSTS: service.host, PUSH_CA_FILE: service.caFile } })
  const factories = await import('@/tests/factories/shell-room')
  const { issueSensorToken } = await import('@/lib/commands/issue-sensor-token')
  const foundry = await factories.buildFoundry()
  const member = await seedMember('operator')
  const clock = { now: () => Date.now() }
  const { token } = await issueSensorToken({ sensorId: foundry.sensorId }, { member, clock })
  const anonymous = newClient(server.baseUrl)
  document = (await (await anonymous.fetch('/api/v1/openapi.json')).json()) as OpenApiDocument
  const operator = await signIn(server.baseUrl, member.email, member.password)
  const boss = await seedMember('owner')
  const owner = await signIn(server.baseUrl, boss.email, boss.password)
  scene = { foundry, factories, service, operator, owner, anonymous, dataDir: server.dataDir, sensorToken: token, ask }
})
afterAll(() => Promise.all([server.stop(), stopService()]))

const doorOf = (operationId: string) => DESCRIBED_DOORS.find((door) => door.operationId === operationId)

const ask: Scene['ask'] = async (client, operationId, { params = {}, query = {}, headers = {}, body, text } = {}) => {
  const { method, path } = doorOf(operationId) ?? { method: 'GET', path: '/no-such-door' }
  const address = path.replaceAll(/\{(\w+)\}/g, (_all, name: string) => encodeURIComponent(params[name] ?? ''))
  const search = Object.keys(query).length === 0 ? '' : `?${new URLSearchParams(query)}`
  const response = await client.fetch(`${address}${search}`, {
    method,
    headers: {
      ...headers,
      ...(body === undefined ? {} : { 'content-type': 'application/json' }),
      ...(text === undefined ? {} : { 'content-type': 'text/csv' }),
    },
    ...(body === undefined ? {} : { body: JSON.stringify(body) }),
    ...(text === undefined ? {} : { body: text }),
  })
  seen.set(operationId, (seen.get(operationId) ?? new Set()).add(response.status))
  misfits.push(...(await misfitsOf(response.clone(), operationId)))
  return response
}

async function misfitsOf(response: Response, operationId: string): Promise<string[]> {
  const where = `${operationId} ${response.status}`
  const { method, path } = doorOf(operationId) ?? { method: '', path: '' }
  const operation = document.paths[path]?.[method.toLowerCase()] as
    | { responses: Record<string, { content?: Record<string, { schema: object }>; headers?: object }> }
    | undefined
  const described = operation?.responses[response.status]
  if (!described) return [`${where}: not described`]
  const missing = Object.keys(described.headers ?? {}).filter((name) => !response.headers.has(name))
  const text = await response.text()
  const type = response.headers.get('content-type')?.split(';')[0] ?? ''
  if (!described.content) return [...missing, ...(text === '' ? [] : ['a body that is not described'])].map((what) => `${where}: ${what}`)
  const schema = described.content[type]?.schema
  if (!schema) return [`${where}: ${type} is not described`]
  const ajv = addFormats.default(new Ajv2020({ strict: false, allErrors: true }))
  const validate = ajv.compile({ ...schema, components: document['components'] })
  if (validate(type.endsWith('json') ? JSON.parse(text) : text)) return missing.map((name) => `${where}: no header ${name}`)
  return [`${where}: ${ajv.errorsText(validate.errors)}\n${text}`]
}

it('the served description is the one that is made from the schemas', () => {
  expect(document).toEqual(JSON.parse(JSON.stringify(openApiDocument(DESCRIBED_DOORS, { address: server.baseUrl }))))
})

describe.each(DESCRIBED_DOORS)('$method $path', ({ operationId, answers, who }) => {
  it('gives every answer that is described, and only such', async () => {
    const play = SCENES[operationId]
    expect(play, 'a scene in tests/setup/door-scenes.ts').toBeDefined()
    const known = misfits.length
    await play?.(scene)
    expect(misfits.slice(known)).toEqual([])
    const promised = Object.keys(answers).map(Number)
    expect([...(seen.get(operationId) ?? [])]).toEqual(expect.arrayContaining(promised))
  })

  it('refuses a stranger and an odd body as described', async () => {
    const known = misfits.length
    const visitor: Client = who === 'sensor' ? scene.anonymous : scene.operator
    const params = { treeId: 'x', bathId: 'x', placeId: 'x', sensorId: 'x', uploadId: 'x', evidenceId: 'x' }
    await ask(scene.anonymous, operationId, { params })
    const hasBody = doorOf(operationId)?.body !== undefined
    if (hasBody) await ask(visitor, operationId, { params, body: { odd: true } })
    expect(misfits.slice(known)).toEqual([])
  })
})

it('the check sees an answer that does not fit', async () => {
  const odd = Response.json({ status: 'splendid' })
  expect(await misfitsOf(odd, 'readHealth')).toEqual([expect.stringContaining('readHealth 200')])
  expect(await misfitsOf(new Response('', { status: 418 }), 'readHealth')).toEqual(['readHealth 418: not described'])
})
