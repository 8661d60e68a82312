import type { Encoding } from '@/lib/uploads/upload-settings'

/**
 * Text encoding of a file by its first bytes: by its byte-order mark, by the zero bytes between Latin letters, by being whole UTF-8.
 * Anything else is taken for Latin-1, in which every byte is a letter.
 */
export function guessEncoding(head: Uint8Array): Encoding {
  if (head[0] === 0xff && head[1] === 0xfe) return 'utf-16le'
  const pairs = Math.floor(Math.min(head.length, 2000) / 2)
  let zeros = 0
  for (let pair = 0; pair < pairs; pair += 1) if (head[pair * 2 + 1] === 0 && head[pair * 2] !== 0) zeros += 1
  if (pairs > 0 && zeros > 0.4 * pairs) return 'utf-16le'
  try {
    // Streamed, so that a letter cut off by the end of the sample is no fault.
    new TextDecoder('utf-8', { fatal: true }).decode(head, { stream: true })
    return 'utf-8'
  } catch {
    return 'latin1'
  }
}
