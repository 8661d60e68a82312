import { z } from 'zod'
import { AppError, traceOf, type ErrorCode } from '@/lib/core/errors'
import { log } from '@/lib/core/log'

const MOST_FIELDS = 50

export type ProblemCode = ErrorCode | 'internal'

/** The status of each problem, and what it means to the program that gets it. */
export const PROBLEMS: Readonly<Record<ProblemCode, { status: number; text: string }>> = {
  malformed: { status: 400, text: 'The body is not JSON.' },
  unauthenticated: { status: 401, text: 'No session or token, or one that has ended.' },
  forbidden: { status: 403, text: "The member's role may not do this, or the request came from another site." },
  not_found: { status: 404, text: 'What the path or the body names is not there.' },
  conflict: { status: 409, text: 'It does not go with what is there now. Read it again before you send anew.' },
  too_large: { status: 413, text: 'The body is too large. Send less at once.' },
  unsupported_media_type: { status: 415, text: 'The body must be sent as application/json, or as the kind that the door names.' },
  invalid_input: { status: 422, text: 'Fields are missing or wrong; `fields` says which, and why.' },
  unprocessable: { status: 422, text: 'The fields are right by themselves, but cannot be true together or at this moment.' },
  too_many_requests: { status: 429, text: 'Wait as many seconds as Retry-After says.' },
  internal: { status: 500, text: 'A fault of Kilnward. It stands in the log of the server.' },
  unavailable: { status: 503, text: 'The records are busy or the disk is full. Nothing was saved; send again after Retry-After.' },
}

const TYPE_PREFIX = 'urn:kilnward:problem:'

/** The stable name of a problem. */
export const problemType = (code: ProblemCode): string => `${TYPE_PREFIX}${code}`

// oxlint-disable-next-line typescript/no-unsafe-type-assertion -- the keys of the list above
const CODES = Object.keys(PROBLEMS) as ProblemCode[]

/** A problem document as a client sees it. Some doors add members of their own. */
export const problemDocument = z.looseObject({
  type: z.enum(CODES.map(problemType)).describe('What to branch on.'),
  title: z.string().describe('The same in words.'),
  status: z.int().min(400).max(599),
  detail: z.string().describe('A sentence for a person.'),
  fields: z
    .array(z.object({ path: z.string(), message: z.string() }))
    .max(MOST_FIELDS)
    .optional()
    .describe('What is wrong with the body, field by field.'),
  fieldsLeftOut: z.int().optional().describe('How many more there are.'),
  retryAfterSeconds: z.int().optional().describe('As in the header Retry-After.'),
})

/** Problem details of RFC 9457. `type` is a stable URN that a client may branch on; `detail` is a sentence for a person. */
export function problem(code: ProblemCode, detail: string, extra: object = {}, headers: HeadersInit = {}): Response {
  const { status } = PROBLEMS[code]
  return Response.json(
    { ...extra, type: problemType(code), title: code.replaceAll('_', ' '), status, detail },
    {
      status,
      headers: { 'cache-control': 'no-store', ...Object.fromEntries(new Headers(headers)), 'content-type': 'application/problem+json' },
    },
  )
}

/** What the database's own refusals mean to a person; null when the error is not one of them. */
export function storageTrouble(error: unknown): 'busy' | 'full' | 'failing' | null {
  for (let inner = error; inner instanceof Error; inner = 'parent' in inner ? inner.parent : inner.cause) {
    const code = 'code' in inner ? String(inner.code) : ''
    if (code.startsWith('SQLITE_BUSY') || code.startsWith('SQLITE_LOCKED')) return 'busy'
    if (code.startsWith('SQLITE_FULL')) return 'full'
    if (/^SQLITE_(IOERR|READONLY|CANTOPEN)/.test(code)) return 'failing'
  }
  return null
}

const TROUBLE = {
  busy: 'The records are busy. Nothing was saved; try again in a moment.',
  full: 'The disk of the server is full. Nothing was saved. Free some space, then try again.',
  failing: 'The disk of the server does not take or give data. Nothing was saved. Check it, then try again.',
}

/** The problem document of anything thrown. An unknown error is logged and answered without its message. */
export function problemOf(error: unknown, request: { method: string; url: string }): Response {
  if (error instanceof AppError) return problem(error.code, error.message, error.extra, headersOf(error))
  if (error instanceof z.ZodError) {
    const fields = error.issues.slice(0, MOST_FIELDS).map((issue) => ({ path: issue.path.join('.'), message: issue.message }))
    const more = error.issues.length > MOST_FIELDS ? { fieldsLeftOut: error.issues.length - MOST_FIELDS } : {}
    return problem('invalid_input', 'Some fields were not accepted.', { fields, ...more })
  }
  const where = { method: request.method, path: new URL(request.url).pathname }
  const trouble = storageTrouble(error)
  if (trouble) {
    log('request.unavailable', { ...where, trouble })
    return problem('unavailable', TROUBLE[trouble], {}, { 'retry-after': trouble === 'busy' ? '1' : '30' })
  }
  log('request.failed', { ...where, error: traceOf(error) })
  return problem('internal', 'The server could not finish this request.')
}

function headersOf(error: AppError): Record<string, string> {
  const seconds = error.extra['retryAfterSeconds']
  if (typeof seconds === 'number') return { 'retry-after': String(seconds) }
  return error.code === 'unavailable' ? { 'retry-after': '1' } : {}
}
