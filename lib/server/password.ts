import { randomBytes, scrypt, timingSafeEqual } from 'node:crypto'
import { Semaphore } from 'async-mutex'
import { processWide } from '@/lib/server/process-wide'

const BLOCK_SIZE = 8
const PARALLELISM = 1
const KEY_BYTES = 32
const SALT_BYTES = 16

/** 2^17 x 8 x 128 bytes is 128 MiB for each hash. */
export const PASSWORD_COST = 2 ** 17

// A storm of sign-ins must leave threads for the database.
const turns = processWide('password turns', () => new Semaphore(2))

function derive(password: string, salt: Buffer, cost: number, blockSize: number, parallelism: number): Promise<Buffer> {
  const maxmem = 256 * cost * blockSize
  return turns.runExclusive(
    () =>
      new Promise((resolve, reject) => {
        // The same letters may be typed composed or decomposed.
        scrypt(password.normalize('NFC'), salt, KEY_BYTES, { N: cost, r: blockSize, p: parallelism, maxmem }, (error, key) =>
          error ? reject(error) : resolve(key),
        )
      }),
  )
}

/**
 * Hash of a new password as `scrypt$N$r$p$salt$hash`, salt and hash in base64url.
 *
 * @param cost N of scrypt; a test may lower it, the program never does.
 */
export async function hashPassword(password: string, cost: number = PASSWORD_COST): Promise<string> {
  const salt = randomBytes(SALT_BYTES)
  const key = await derive(password, salt, cost, BLOCK_SIZE, PARALLELISM)
  return ['scrypt', cost, BLOCK_SIZE, PARALLELISM, salt.toString('base64url'), key.toString('base64url')].join('$')
}

/**
 * Whether the password belongs to the hash, compared in constant time.
 * With no hash (an unknown member) it works as long and answers false, so that the time tells nothing.
 */
export async function isPasswordRight(password: string, hash: string | null, cost: number = PASSWORD_COST): Promise<boolean> {
  const [scheme, n, r, p, salt, key] = hash?.split('$') ?? []
  if (scheme !== 'scrypt' || !salt || !key) {
    await derive(password, Buffer.alloc(SALT_BYTES), cost, BLOCK_SIZE, PARALLELISM)
    return false
  }
  const expected = Buffer.from(key, 'base64url')
  const actual = await derive(password, Buffer.from(salt, 'base64url'), Number(n), Number(r), Number(p))
  return expected.length === actual.length && timingSafeEqual(expected, actual)
}

const RANDOM_PASSWORD_COST = 1024

/** Hash of a password that nobody knows, for a member who is not to sign in. It is too long to guess, whatever the cost of a guess. */
export function hashRandomPassword(): Promise<string> {
  return hashPassword(randomBytes(32).toString('base64url'), RANDOM_PASSWORD_COST)
}
