import { createHash, randomBytes } from 'node:crypto'

/** UUID version 7 (RFC 9562): sortable by the moment it was made, so new rows land at the end of an index. */
export function newId(now: number = Date.now()): string {
  const bytes = randomBytes(16)
  bytes.writeUIntBE(now, 0, 6)
  bytes[6] = (bytes[6]! & 0x0f) | 0x70
  bytes[8] = (bytes[8]! & 0x3f) | 0x80
  const hex = bytes.toString('hex')
  return `${hex.slice(0, 8)}-${hex.slice(8, 12)}-${hex.slice(12, 16)}-${hex.slice(16, 20)}-${hex.slice(20)}`
}

export const sha256Hex = (text: string): string => createHash('sha256').update(text).digest('hex')
