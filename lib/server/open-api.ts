import { z } from 'zod'
import { rolesFor } from '@/lib/members/roles'
import { DOOR_GROUPS, type DoorAnswer, type DoorDescription } from '@/lib/server/doors/door'
import { LARGEST_BODY_BYTES } from '@/lib/server/limits'
import { PROBLEMS, problemDocument, problemType, type ProblemCode } from '@/lib/server/problem'

type Json = Record<string, unknown>

/** An OpenAPI 3.1 document; the parts that pages and tests walk through are typed, the rest is JSON. */
export type OpenApiDocument = {
  openapi: '3.1.0'
  tags: { name: string; description: string }[]
  paths: Record<string, Record<string, Operation>>
} & Json
export type Operation = { operationId: string; summary: string; tags: string[] } & Json

const API_VERSION = '1'

/**
 * The description of the API, made from the schemas that the doors check with.
 *
 * @param options.address where this foundry's Kilnward is, without a slash at the end.
 */
export function openApiDocument(doors: readonly DoorDescription[], { address }: { address: string }): OpenApiDocument {
  const paths: OpenApiDocument['paths'] = {}
  for (const door of doors) (paths[door.path] ??= {})[door.method.toLowerCase()] = operationOf(door)
  return {
    openapi: '3.1.0',
    info: {
      title: 'Kilnward',
      version: API_VERSION,
      description:
        'Log of dips and drying clock of a shell room. Instants travel as epoch milliseconds (UTC), temperatures in °C, humidity in % RH, ' +
        'masses in kg. Refusals are problem documents (RFC 9457). Forecast times come in pairs, likely and safe: they advise, a person decides.',
    },
    servers: [{ url: address }],
    tags: DOOR_GROUPS.map((group) => ({ ...group })),
    paths,
    components: {
      securitySchemes: {
        session: {
          type: 'apiKey',
          in: 'cookie',
          name: `${address.startsWith('https:') ? '__Secure-' : ''}next-auth.session-token`,
          description: 'Set by the sign-in page; 12 hours. A write must also carry the own address as Origin, as every browser sends it.',
        },
        sensorToken: { type: 'http', scheme: 'bearer', description: 'Token of one sensor, kw_…, made on the page of the sensors.' },
      },
      schemas: { Problem: schemaOf(problemDocument, 'output') },
    },
  }
}

/** Statuses that a door can answer with a problem, and the codes behind each. */
function problemsOf(door: DoorDescription): Map<number, ProblemCode[]> {
  const codes: ProblemCode[] = [
    ...(door.body ? (['malformed', 'too_large', 'unsupported_media_type', 'invalid_input'] as const) : []),
    ...(door.who === 'anybody' ? [] : (['unauthenticated', 'unavailable'] as const)),
    ...(door.who === 'anybody' || door.who === 'sensor' ? [] : (['forbidden'] as const)),
    ...(door.limit ? (['too_many_requests'] as const) : []),
    ...(door.problems ?? []),
    'internal',
  ]
  const byStatus = new Map<number, ProblemCode[]>()
  for (const code of new Set(codes)) byStatus.set(PROBLEMS[code].status, [...(byStatus.get(PROBLEMS[code].status) ?? []), code])
  return byStatus
}

function operationOf(door: DoorDescription): Operation {
  const { operationId, summary, text, group, body, limit } = door
  return {
    operationId,
    summary,
    description: [text, rightsOf(door), limit && `At most ${limit.requests} requests a minute for each ${limit.per}.`]
      .filter(Boolean)
      .join('\n\n'),
    tags: [group],
    security: securityOf(door),
    parameters: parametersOf(door),
    ...(body && {
      requestBody: {
        required: true,
        description: `At most ${Math.floor((body.largestBytes ?? LARGEST_BODY_BYTES) / 1024)} KiB.`,
        content: { [body.type ?? 'application/json']: { schema: schemaOf(body.schema, 'input'), example: body.example } },
      },
    }),
    responses: {
      ...Object.fromEntries(Object.entries(door.answers).map(([status, answer]) => [status, answerOf(answer)])),
      ...Object.fromEntries([...problemsOf(door)].map(([status, codes]) => [status, problemAnswer(door, codes)])),
    },
    ...(limit && { 'x-rate-limit': { requests: limit.requests, seconds: 60, per: limit.per } }),
  }
}

function rightsOf({ who }: DoorDescription): string {
  if (who === 'anybody') return 'Open to everybody.'
  if (who === 'sensor') return 'For a sensor, with its token.'
  return `For members with the role ${rolesFor(who).join(', ')}.`
}

function securityOf({ who }: DoorDescription): Json[] {
  if (who === 'anybody') return []
  return [who === 'sensor' ? { sensorToken: [] } : { session: [] }]
}

function parametersOf({ params, query, headers, method, who }: DoorDescription): Json[] {
  const isOwnOriginAsked = method !== 'GET' && who !== 'anybody' && who !== 'sensor'
  const origin = { Origin: { schema: z.url(), text: "The program's own address. Browsers send it by themselves." } }
  return [
    ...parameters('path', params),
    ...parameters('query', query),
    ...parameters('header', { ...headers, ...(isOwnOriginAsked && origin) }),
  ]
}

const parameters = (place: 'path' | 'query' | 'header', named: DoorDescription['params'] = {}): Json[] =>
  Object.entries(named).map(([name, { schema, text }]) => ({
    name,
    in: place,
    required: place === 'path' || !schema.safeParse(undefined).success,
    description: text,
    schema: schemaOf(schema, 'input'),
  }))

function answerOf({ text, schema, type = 'application/json', example, headers = {} }: DoorAnswer): Json {
  return {
    description: text,
    ...(Object.keys(headers).length > 0 && { headers: headersOf(headers) }),
    ...(schema && {
      content: { [type]: { schema: schemaOf(schema, 'output'), ...(example !== undefined && { example }) } },
    }),
  }
}

const headersOf = (headers: Readonly<Record<string, string>>): Json =>
  Object.fromEntries(Object.entries(headers).map(([name, description]) => [name, { description, schema: { type: 'string' } }]))

function problemAnswer({ conflict, who }: DoorDescription, codes: readonly ProblemCode[]): Json {
  const { status } = PROBLEMS[codes[0] ?? 'internal']
  const problem = { $ref: '#/components/schemas/Problem' }
  const headers = {
    ...((status === 429 || status === 503) && { 'Retry-After': 'Seconds to wait.' }),
    ...(status === 401 && who === 'sensor' && { 'WWW-Authenticate': 'Bearer realm="kilnward"' }),
  }
  return {
    description: codes.map((code) => `\`${code}\`: ${PROBLEMS[code].text}`).join('\n\n'),
    ...(Object.keys(headers).length > 0 && { headers: headersOf(headers) }),
    content: {
      'application/problem+json': {
        schema: status === 409 && conflict ? { allOf: [problem, looseSchemaOf(conflict)] } : problem,
        examples: Object.fromEntries(codes.map((code) => [code, { value: exampleProblem(code) }])),
      },
    },
  }
}

const exampleProblem = (code: ProblemCode): Json => ({
  type: problemType(code),
  title: code.replaceAll('_', ' '),
  status: PROBLEMS[code].status,
  detail: PROBLEMS[code].text,
  ...(code === 'invalid_input' && { fields: [{ path: 'airTempC', message: 'A shell room is not hotter than 60 °C.' }] }),
  ...(code === 'too_many_requests' && { retryAfterSeconds: 12 }),
})

/** Only members that a 409 has when trees were refused: none of them is promised. */
const looseSchemaOf = (schema: z.ZodObject): Json => schemaOf(schema.partial().loose(), 'output')

function schemaOf(schema: z.ZodType, io: 'input' | 'output'): Json {
  const { $schema: _dialect, ...json } = z.toJSONSchema(schema, {
    io,
    override: ({ jsonSchema }) => {
      // A format says the same in one word; and every number is a safe integer in JavaScript.
      if (jsonSchema.format !== undefined) delete jsonSchema.pattern
      if (jsonSchema.minimum === Number.MIN_SAFE_INTEGER) delete jsonSchema.minimum
      if (jsonSchema.maximum === Number.MAX_SAFE_INTEGER) delete jsonSchema.maximum
    },
  })
  return json
}
