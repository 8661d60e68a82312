import { createCipheriv, createDecipheriv, hkdfSync, randomBytes } from 'node:crypto'
import { env } from '@/lib/core/env'

/** For which a key of its own is made. */
export const BROKER_PASSWORD = 'mqtt password'

const CIPHER = 'aes-256-gcm'
const NONCE_BYTES = 12
const TAG_BYTES = 16

/** Of NEXTAUTH_SECRET, which does not lie in the records: who has a copy of them alone cannot open what is sealed. */
const keyFor = (purpose: string) => Buffer.from(hkdfSync('sha256', env().NEXTAUTH_SECRET, '', `kilnward ${purpose}`, 32))

/** Seals a secret that the program has to be able to read again, such as the password of a broker. `purpose` keeps keys apart. */
export function sealText(text: string, purpose: string): string {
  const nonce = randomBytes(NONCE_BYTES)
  const cipher = createCipheriv(CIPHER, keyFor(purpose), nonce)
  const sealed = Buffer.concat([cipher.update(text, 'utf8'), cipher.final()])
  return Buffer.concat([nonce, cipher.getAuthTag(), sealed]).toString('base64url')
}

/** Opens it again. Null where it was sealed with another NEXTAUTH_SECRET, or changed. */
export function openSealedText(sealed: string, purpose: string): string | null {
  const bytes = Buffer.from(sealed, 'base64url')
  const [nonce, tag] = [bytes.subarray(0, NONCE_BYTES), bytes.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES)]
  try {
    const decipher = createDecipheriv(CIPHER, keyFor(purpose), nonce, { authTagLength: TAG_BYTES })
    decipher.setAuthTag(tag)
    return Buffer.concat([decipher.update(bytes.subarray(NONCE_BYTES + TAG_BYTES)), decipher.final()]).toString('utf8')
  } catch {
    return null
  }
}
