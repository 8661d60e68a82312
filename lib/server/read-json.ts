import type { z } from 'zod'
import { AppError } from '@/lib/core/errors'
import { LARGEST_BODY_BYTES } from '@/lib/server/limits'

async function readText(request: Request, maxBytes: number): Promise<string> {
  const tooLarge = () => new AppError('too_large', `The body is larger than ${Math.floor(maxBytes / 1024)} KiB.`)
  if (Number(request.headers.get('content-length') ?? 0) > maxBytes) throw tooLarge()
  const chunks: Uint8Array[] = []
  let size = 0
  for await (const chunk of request.body ?? []) {
    size += chunk.byteLength
    if (size > maxBytes) throw tooLarge()
    chunks.push(chunk)
  }
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(Buffer.concat(chunks))
  } catch {
    throw new AppError('malformed', 'The body is not UTF-8 text.')
  }
}

/**
 * The checked JSON body of a request.
 *
 * @throws {AppError} too_large past `maxBytes` (default 64 KiB), malformed when it is not JSON.
 * @throws {z.ZodError} when the schema refuses it; the route wrapper answers 422 with the fields.
 */
export async function readJson<Schema extends z.ZodType>(
  request: Request,
  schema: Schema,
  { maxBytes = LARGEST_BODY_BYTES }: { maxBytes?: number } = {},
): Promise<z.output<Schema>> {
  const text = await readText(request, maxBytes)
  let body: unknown
  try {
    body = JSON.parse(text)
  } catch {
    throw new AppError('malformed', text === '' ? 'The body is empty; it must be JSON.' : 'The body is not valid JSON.')
  }
  return schema.parse(body)
}
