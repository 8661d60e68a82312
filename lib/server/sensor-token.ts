import { randomBytes, timingSafeEqual } from 'node:crypto'
import { sha256Hex } from '@/lib/core/ids'

const TOKEN = /^kw_([0-9a-f]{16})_([A-Za-z0-9_-]{43})$/

/** A new token of a sensor. `token` is shown once; only the id and the digest are stored. */
export function makeSensorToken(): { id: string; token: string; secretSha256: string } {
  const id = randomBytes(8).toString('hex')
  const secret = randomBytes(32).toString('base64url')
  // 256 random bits need no slow hash.
  return { id, token: `kw_${id}_${secret}`, secretSha256: sha256Hex(secret) }
}

/** Id and digest of a presented token; null when it does not look like one. */
export function parseSensorToken(token: string): { id: string; secretSha256: string } | null {
  const [, id, secret] = TOKEN.exec(token) ?? []
  return id && secret ? { id, secretSha256: sha256Hex(secret) } : null
}

/** Compares two SHA-256 digests in hex in constant time. */
export function isSameDigest(left: string, right: string): boolean {
  return left.length === right.length && timingSafeEqual(Buffer.from(left), Buffer.from(right))
}
