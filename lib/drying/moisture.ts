import { assertWithin } from '@/lib/drying/guards'

/** Page's exponent: a flat start, then a tail. Our own starting value, to be calibrated. */
export const DEFAULT_PAGE_EXPONENT = 1.1

/**
 * Page's rate constant for a coat that reaches `target` at its need: k = -ln MR* / need^n.
 *
 * @source Page 1949, MR = exp(-k t^n), with the dose in reference hours for t.
 * @example pageK(4, 0.1) // 0.501
 */
export function pageK(need: number, target: number, n: number = DEFAULT_PAGE_EXPONENT): number {
  assertWithin('Need in reference hours', need, 1e-6, 1e6)
  assertWithin('Moisture target', target, 1e-6, 1 - 1e-6)
  return -Math.log(target) / need ** n
}

/**
 * Moisture ratio of a coat after a dose: 1 just dipped, `target` at its need, falling throughout.
 *
 * @source Page 1949, MR = exp(-k D^n) with k = pageK(need, target), which is MR*^((D / need)^n).
 */
export function moistureRatio(dose: number, need: number, target: number, n: number = DEFAULT_PAGE_EXPONENT): number {
  assertWithin('Dose in reference hours', dose, 0, Infinity)
  return Math.exp(-pageK(need, target, n) * dose ** n)
}
