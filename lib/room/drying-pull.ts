import { DEFAULT_FLAG_LIMITS } from '@/lib/drying/flags'
import type { QueueRoom } from '@/lib/queue/contract'

/** Under these shares of the reference speed drying is called slow, and very slow. Our own choice. */
const SLOW_SPEED = 0.85
export const VERY_SLOW_SPEED = 0.7

/** The drying pull as a word. */
export const PULL_WORDS: Record<QueueRoom['pull'], string> = {
  slow: 'Slow',
  good: 'Good',
  'too dry for face coats': 'Too dry for face coats',
  'not known': 'Not known',
}

export type Pull = { wetBulbGapK: number; roomFactor: number }

/** What an air does to wet coats: pulls too hard for a face coat, well, or slowly. */
export function dryingPull({ wetBulbGapK, roomFactor }: Pull): Exclude<QueueRoom['pull'], 'not known'> {
  if (wetBulbGapK > DEFAULT_FLAG_LIMITS.chillWarnK || roomFactor > DEFAULT_FLAG_LIMITS.chillSpeed) return 'too dry for face coats'
  return roomFactor < SLOW_SPEED ? 'slow' : 'good'
}

/** The same for a long stretch of time, where slow comes in two degrees: 'Slow' and 'Very slow'. */
export function pullWord(pull: Pull): string {
  return pull.roomFactor < VERY_SLOW_SPEED ? 'Very slow' : PULL_WORDS[dryingPull(pull)]
}
