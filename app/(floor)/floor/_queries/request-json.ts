import { readProblem, type Problem } from './shapes'

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
export async function postJson<T>(path: string, body: unknown, isAnswer: (json: unknown) => json is T): Promise<Outcome<T>> {
  try {
    const response = await fetch(path, {
      method: 'POST',
      headers: { 'content-type': 'application/json', accept: 'application/json' },
      body: JSON.stringify(body),
      signal: AbortSignal.timeout(ANSWER_WITHIN_MS),
    })
    const json: unknown = await response.json().catch(() => null)
    if (response.ok) {
      return isAnswer(json) ? { kind: 'done', data: json } : { kind: 'unreachable', detail: 'The answer of the server was not understood.' }
    }
    const problem = readProblem(json)
    if (!problem || response.status >= 500) return { kind: 'unreachable', detail: problem?.detail ?? 'The server could not answer.' }
    return { kind: 'refused', status: response.status, problem }
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
