import { z } from 'zod'

/** A problem document of the server, as far as the floor reads it. */
const problemDocument = z.object({
  detail: z.string().catch('The server refused this.'),
  fields: z.array(z.object({ path: z.string(), message: z.string() })).catch([]),
  trees: z.unknown().optional(),
})
export type Problem = z.infer<typeof problemDocument>

/**
 * How a write ended. 'unreachable' covers everything after which nobody knows whether the server has written it down: no network,
 * no answer in time, a broken answer. The same operation id may then be sent again.
 */
export type Outcome<T> =
  | { kind: 'done'; data: T }
  | { kind: 'refused'; status: number; problem: Problem }
  | { kind: 'unreachable'; detail: string }

const ANSWER_WITHIN_MS = 12_000

/** Sends a write and reads the answer; never throws. */
export async function postJson<T>(path: string, body: unknown, answer: z.ZodType<T>): Promise<Outcome<T>> {
  try {
    const response = await fetch(path, {
      method: 'POST',
      headers: { 'content-type': 'application/json', accept: 'application/json' },
      body: JSON.stringify(body),
      signal: AbortSignal.timeout(ANSWER_WITHIN_MS),
    })
    const json: unknown = await response.json().catch(() => null)
    if (response.ok) {
      const parsed = answer.safeParse(json)
      return parsed.success
        ? { kind: 'done', data: parsed.data }
        : { kind: 'unreachable', detail: 'The answer of the server was not understood.' }
    }
    const problem = problemDocument.safeParse(json)
    if (!problem.success || response.status >= 500) {
      return { kind: 'unreachable', detail: problem.success ? problem.data.detail : 'The server could not answer.' }
    }
    return { kind: 'refused', status: response.status, problem: problem.data }
  } catch {
    return { kind: 'unreachable', detail: 'The server does not answer.' }
  }
}

/** The sentence of a refusal for a person. */
export function refusalWords(status: number, problem: Problem): string {
  if (status === 401) return 'You are signed out. Sign in again, then log it.'
  const [field] = problem.fields
  return field ? `${problem.detail} ${field.message}` : problem.detail
}
