import { promisify } from 'node:util'
import { gzip } from 'node:zlib'
import { processWide } from '@/lib/server/process-wide'

const pack = promisify(gzip)

type Body = { json: string; packed: Promise<Buffer<ArrayBuffer>> | null }

/** Goes with the value that it was made of. */
const bodies = processWide('shared bodies', () => new WeakMap<object, Body>())

/**
 * A JSON answer of a value that many ask for: written and packed once, however many get it. The value must not change.
 *
 * @param headers those of the answer; the length and the encoding are added.
 */
export async function sharedJson(value: object, request: Request, headers: Record<string, string>): Promise<Response> {
  let body = bodies.get(value)
  if (!body) {
    body = { json: JSON.stringify(value), packed: null }
    bodies.set(value, body)
  }
  const common = { ...headers, 'content-type': 'application/json', vary: 'accept-encoding' }
  if (!/\bgzip\b/.test(request.headers.get('accept-encoding') ?? '')) return new Response(body.json, { headers: common })
  const packed = await (body.packed ??= pack(body.json))
  return new Response(packed, { headers: { ...common, 'content-encoding': 'gzip', 'content-length': String(packed.length) } })
}
