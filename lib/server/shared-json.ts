import { processWide } from '@/lib/server/process-wide'

/** Goes with the value that it was made of. */
const texts = processWide('shared texts', () => new WeakMap<object, string>())

/**
 * A JSON answer of a value that many ask for: written once, however many get it. The value must not change.
 *
 * It is packed by the framework, for each answer: that takes `content-encoding` off a route's own answer and would pack it again.
 */
export function sharedJson(value: object, headers: Record<string, string>): Response {
  let text = texts.get(value)
  if (text === undefined) {
    text = JSON.stringify(value)
    texts.set(value, text)
  }
  return new Response(text, { headers: { ...headers, 'content-type': 'application/json' } })
}
