import { RateLimiterMemory, type RateLimiterRes } from 'rate-limiter-flexible'
import { env } from '@/lib/core/env'
import { AppError } from '@/lib/core/errors'
import { sha256Hex } from '@/lib/core/ids'
import { processWide } from '@/lib/server/process-wide'
import { isSameDigest } from '@/lib/server/sensor-token'

const TRIES_PER_MINUTE = 10
const tries = processWide('setup code tries', () => new RateLimiterMemory({ points: TRIES_PER_MINUTE, duration: 60 }))

/** Whether the first owner has to know the code that the start printed: so when others can reach this server. */
export const asksForSetupCode = (): boolean => env().SETUP_CODE !== undefined

/** The code as typed by somebody: capitals and dashes do not matter. */
const bare = (code: string) => code.toUpperCase().replaceAll(/[^A-Z0-9]/g, '')

/**
 * Whether a typed code is the one that this start printed; anything is, where none was.
 *
 * @throws {AppError} too_many_requests after ten tries in a minute.
 */
export async function isSetupCodeRight(typed: string): Promise<boolean> {
  const { SETUP_CODE: code } = env()
  if (code === undefined) return true
  await tries.consume('all').catch((refusal: RateLimiterRes) => {
    const seconds = Math.ceil(refusal.msBeforeNext / 1000)
    throw new AppError('too_many_requests', `Too many tries. Wait ${seconds} s, then try again.`, { retryAfterSeconds: seconds })
  })
  return isSameDigest(sha256Hex(bare(typed)), sha256Hex(bare(code)))
}
