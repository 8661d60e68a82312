import { EXPECTED_INSIDE, FEWEST_TO_TELL, type ForecastCheck } from '@/lib/calibration/forecast-check'
import type { FactorProposal, RecipeCoatProposal } from '@/lib/calibration/proposals'
import { FEWEST_COATS } from '@/lib/calibration/proposals'
import { formatDuration } from '@/lib/format/duration'
import { NOT_CALIBRATED } from '@/lib/format/time-pair'
import { wholeNumber } from '@/lib/format/units'
import { shortNumber } from '@/lib/recipes/coat-cells'

const coatsWord = (count: number) => (count === 1 ? '1 coat' : `${count} coats`)

/** A factor, two decimals at most: '0.92'. */
export const factorWords = (factor: number): string => shortNumber(factor)

/** A factor before and after: '1 to 0.92'. */
export const changeWords = ({ before, after }: { before: number; after: number }): string =>
  `${factorWords(before)} to ${factorWords(after)}`

type AcceptedCoat = { number: number; needBefore: number; needAfter: number; coatsAfter: number }

/**
 * The note of a version that finished coats have brought.
 *
 * @example acceptedNote([{ number: 3, needBefore: 4, needAfter: 4.4, coatsAfter: 14 }]) // => 'Coat 3: 4 to 4.4 reference hours, by 14 coats.'
 */
export function acceptedNote(coats: readonly AcceptedCoat[]): string {
  const parts = coats.map(({ number, needBefore, needAfter, coatsAfter }) =>
    needBefore === needAfter
      ? `Coat ${number}: ${shortNumber(needAfter)} reference hours confirmed, by ${coatsWord(coatsAfter)}`
      : `Coat ${number}: ${shortNumber(needBefore)} to ${shortNumber(needAfter)} reference hours, by ${coatsWord(coatsAfter)}`,
  )
  return `${parts.join('. ')}.`
}

/** The note of a version that goes back on one. */
export const wentBackNote = ({ number, needBefore, needAfter }: Omit<AcceptedCoat, 'coatsAfter'>): string =>
  needBefore === needAfter
    ? `Coat ${number}: ${shortNumber(needAfter)} reference hours, not confirmed any more.`
    : `Coat ${number}: back from ${shortNumber(needBefore)} to ${shortNumber(needAfter)} reference hours.`

/**
 * How good the clock is, in a sentence or two, with its count.
 *
 * @example clockSentence({ count: 84, inside: 66, biasMinutes: 12, middleHalf: [-10, 40] })
 * // => 'Of 84 coats that were checked, 66 (79 %) came dry between P10 and P90; it should be near 80 %. Likely times were 12 min early in the middle.'
 */
export function clockSentence({ count, inside, biasMinutes }: ForecastCheck): string {
  if (count === 0) return 'No coat tells yet how good the clock is.'
  if (count < FEWEST_TO_TELL) {
    const coats = count === 1 ? 'One coat was checked' : `${count} coats were checked`
    return `${coats}: too few to tell how good the clock is. Ten say something.`
  }
  const share = `${inside} (${wholeNumber((100 * inside) / count)} %)`
  const expected = `it should be near ${wholeNumber(100 * EXPECTED_INSIDE)} %`
  return `Of ${count} coats that were checked, ${share} came dry between P10 and P90; ${expected}. Likely times were ${biasWords(biasMinutes)}.`
}

/** How far off likely times were in the middle: '12 min early in the middle'. A coat that came dry later than likely had an early time. */
export function biasWords(biasMinutes: number | null): string {
  const whole = Math.round(biasMinutes ?? 0)
  if (whole === 0) return 'right in the middle'
  return `${formatDuration(Math.abs(whole) * 60_000)} ${whole > 0 ? 'early' : 'late'} in the middle`
}

/** Signed minutes for a table: '+12 min', '−1 h 05 min'. */
export function signedDuration(minutes: number): string {
  const whole = Math.round(minutes)
  if (whole === 0) return '0\u00A0min'
  return `${whole > 0 ? '+' : '−'}${formatDuration(Math.abs(whole) * 60_000)}`
}

/** A change of a need or a factor on the ln scale with its error, in percent: '+11 ± 7 %'. */
export const learnedWords = ({ mean, sd }: { mean: number; sd: number }): string => {
  const percent = Math.round(100 * (Math.exp(mean) - 1))
  return `${percent > 0 ? '+' : percent < 0 ? '−' : ''}${Math.abs(percent)} ± ${Math.round(100 * sd)}\u00A0%`
}

/** Why a recipe's coat has no proposal that would change it; what stands in its place. */
export function coatVerdictWords({ verdict, learned, coat, isOpen }: RecipeCoatProposal): string {
  if (verdict === 'too few') return `too few: ${learned.count} of ${FEWEST_COATS}`
  if (verdict === 'change') return 'asks for a change'
  if (isOpen) return 'agrees'
  return coat.calibratedByCoats === null ? 'agrees' : `agrees, taken over by ${coatsWord(coat.calibratedByCoats)}`
}

/** Why a place or a recess has no proposal. */
export function factorVerdictWords({ verdict, learned }: FactorProposal<unknown>, nothingToCompare: string): string {
  if (verdict === 'nothing to compare') return nothingToCompare
  if (verdict === 'too few') return `Too few: ${coatsWord(learned.count)} of ${FEWEST_COATS} can be held against others.`
  return verdict === 'agrees' ? 'Finished coats agree with it.' : 'Finished coats ask for a change.'
}

/**
 * How far a version of a recipe is calibrated: 'calibrated', 'not calibrated yet', or '3 of 8 coats calibrated'.
 *
 * @param isCalibrated the version as a whole is.
 */
export function calibrationInShort({
  isCalibrated,
  coats,
}: {
  isCalibrated: boolean
  coats: readonly { calibratedByCoats: number | null }[]
}): string {
  const count = coats.filter(({ calibratedByCoats }) => calibratedByCoats !== null).length
  if (isCalibrated || (count > 0 && count === coats.length)) return 'calibrated'
  return count === 0 ? NOT_CALIBRATED : `${count} of ${coats.length} coats calibrated`
}

/** What a need rests on: 'by 14 coats', or 'not calibrated yet'. */
export const calibratedWords = (count: number | null): string => (count === null ? NOT_CALIBRATED : `by ${coatsWord(count)}`)
