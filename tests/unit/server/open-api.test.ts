import { existsSync, readdirSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { Validator } from '@seriousme/openapi-schema-validator'
import { describe, expect, it } from 'vitest'
import { DESCRIBED_DOORS } from '@/lib/server/doors/all'
import { openApiDocument } from '@/lib/server/open-api'
import { DOORS } from '@/tests/api/authorisation-table'
import { methodsOf } from '@/tests/setup/build'

const root = join(import.meta.dirname, '../../..')
const document = openApiDocument(DESCRIBED_DOORS, { address: 'http://localhost:3000' })

/** 'GET /api/v1/queue' of every route file, with parameters as OpenAPI writes them. */
function routesInSource(): string[] {
  const files = ['app/api/v1', 'app/api/health'].flatMap((folder) =>
    readdirSync(join(root, folder), { recursive: true, encoding: 'utf8' })
      .map((name) => join(folder, name))
      .filter((name) => name.endsWith('/route.ts')),
  )
  return files.flatMap((file) => {
    const path = file
      .replace(/^app/, '')
      .replace('/route.ts', '')
      .replaceAll(/\[(\w+)\]/g, '{$1}')
    return methodsOf(readFileSync(join(root, file), 'utf8')).map((method) => `${method} ${path}`)
  })
}

describe('the description of the API', () => {
  it('has every method of every route, and nothing else', () => {
    expect(existsSync(join(root, 'app/api/v1/queue/route.ts'))).toBe(true)
    expect(DESCRIBED_DOORS.map(({ method, path }) => `${method} ${path}`).toSorted()).toEqual(routesInSource().toSorted())
  })

  it('is OpenAPI 3.1, as a validator reads it', async () => {
    const validator = new Validator()
    // The validator takes the document apart.
    const { valid, errors } = await validator.validate(structuredClone(document))
    expect(errors).toBeUndefined()
    expect(valid).toBe(true)
    expect(validator.version).toBe('3.1')
    const broken = await new Validator().validate({ ...structuredClone(document), paths: { '/x': { get: { responses: [] } } } })
    expect(broken.valid).toBe(false)
    // It compiles the schemas of OpenAPI first.
  }, 30_000)

  it('gives each operation its own id, a summary and a group', () => {
    const ids = DESCRIBED_DOORS.map(({ operationId }) => operationId)
    expect(new Set(ids).size).toBe(ids.length)
    for (const { operationId, summary, text } of DESCRIBED_DOORS) {
      expect(operationId).toMatch(/^[a-z][A-Za-z]+$/)
      expect(summary).not.toMatch(/\.$/)
      expect(text).toMatch(/\.$/)
    }
  })

  it.each(DESCRIBED_DOORS)('$operationId names who may as the authorisation table does, and its parameters', (door) => {
    const route = door.path.replaceAll(/\{(\w+)\}/g, '[$1]')
    const row = DOORS.find((each) => each.method === door.method && each.route === route)
    const operation = document.paths[door.path]?.[door.method.toLowerCase()]
    expect(row).toBeDefined()
    const open = { anybody: [[], 'Open to everybody.'], sensor: [[{ sensorToken: [] }], 'For a sensor'] }
    const who = row?.who ?? 'anybody'
    const [security, words] = who === 'anybody' || who === 'sensor' ? open[who] : [[{ session: [] }], `the role ${who}`]
    expect(operation?.['security']).toEqual(security)
    expect(operation?.['description']).toContain(words)
    expect(Object.keys(door.params ?? {})).toEqual([...door.path.matchAll(/\{(\w+)\}/g)].map(([, name]) => name))
  })

  it.each(DESCRIBED_DOORS.filter(({ body }) => body))('$operationId shows a body that its own schema takes', ({ body }) => {
    expect(body?.schema.safeParse(body.example).error).toBeUndefined()
  })

  it.each(DESCRIBED_DOORS)('$operationId shows answers that fit its schemas', ({ answers }) => {
    const shown = Object.values(answers).filter(({ example }) => example !== undefined)
    for (const { schema, example } of shown) expect(schema?.safeParse(example).error).toBeUndefined()
  })

  it('names every problem with its code, and the limits', () => {
    const readings = JSON.stringify(document.paths['/api/v1/readings']?.['post'])
    expect(readings).toContain('urn:kilnward:problem:too_many_requests')
    expect(readings).toContain('Retry-After')
    expect(document.paths['/api/v1/readings']?.['post']?.['x-rate-limit']).toEqual({ requests: 60, seconds: 60, per: 'token' })
  })

  it('names the session cookie as it is called behind https', () => {
    expect(JSON.stringify(openApiDocument([], { address: 'https://foundry.example' }))).toContain('"__Secure-next-auth.session-token"')
  })
})
