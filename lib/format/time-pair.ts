import { dayWord, formatClock } from '@/lib/format/local-time'

/** Said wherever a promised time rests on starting values that nobody has checked. */
export const NOT_CALIBRATED = 'not calibrated yet'

/** The same, once at the head of many times. */
export const TIMES_NOT_CALIBRATED = `times ${NOT_CALIBRATED}`

/** One of the two promised times, cut so that a screen may set the day small and the clock large. */
export type PairTime = {
  word: 'likely' | 'safe'
  /** '' today, else 'Wed' or 'Wed 21 Oct'. */
  day: string
  /** '15:35', or 'not in sight' where the time lies beyond the forecast. */
  clock: string
  isKnown: boolean
}

export type TimePairWords = { likely: PairTime; safe: PairTime; text: string }

function time(word: PairTime['word'], at: number | null, now: number, timeZone: string): PairTime {
  if (at === null) return { word, day: '', clock: 'not in sight', isKnown: false }
  return { word, day: dayWord(at, now, timeZone), clock: formatClock(at, timeZone), isKnown: true }
}

function words({ word, day, clock }: PairTime): string {
  return day === '' ? `${word} ${clock}` : `${word} ${day} ${clock}`
}

/**
 * The two promised times of a coat, always together: 'likely 15:35, safe 16:20', with the day where it is not today.
 *
 * Likely is when half of such coats are dry, safe when nine of ten are.
 * @example timePairWords({ likelyAt, safeAt }, now, 'Europe/London').text // => 'likely Wed 22:00, safe Thu 02:00'
 */
export function timePairWords(pair: { likelyAt: number | null; safeAt: number | null }, now: number, timeZone: string): TimePairWords {
  const likely = time('likely', pair.likelyAt, now, timeZone)
  const safe = time('safe', pair.safeAt, now, timeZone)
  return { likely, safe, text: `${words(likely)}, ${words(safe)}` }
}
