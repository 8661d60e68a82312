import { z } from 'zod'
import { AppError, type ErrorCode } from '@/lib/core/errors'
import { log } from '@/lib/core/log'

const STATUS: Record<ErrorCode, number> = {
  malformed: 400,
  unauthenticated: 401,
  forbidden: 403,
  not_found: 404,
  conflict: 409,
  too_large: 413,
  unsupported_media_type: 415,
  invalid_input: 422,
  unprocessable: 422,
  too_many_requests: 429,
  unavailable: 503,
}

const MOST_FIELDS = 50

/** Problem details of RFC 9457. `type` is a stable URN that a client may branch on; `detail` is a sentence for a person. */
export function problem(code: ErrorCode | 'internal', detail: string, extra: object = {}, headers: HeadersInit = {}): Response {
  const status = code === 'internal' ? 500 : STATUS[code]
  return Response.json(
    { ...extra, type: `urn:kilnward:problem:${code}`, title: code.replaceAll('_', ' '), status, detail },
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
  log('request.failed', { ...where, error: error instanceof Error ? error.stack : String(error) })
  return problem('internal', 'The server could not finish this request.')
}

function headersOf(error: AppError): Record<string, string> {
  const seconds = error.extra['retryAfterSeconds']
  if (typeof seconds === 'number') return { 'retry-after': String(seconds) }
  return error.code === 'unavailable' ? { 'retry-after': '1' } : {}
}
