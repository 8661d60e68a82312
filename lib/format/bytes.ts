const STEPS = ['B', 'kB', 'MB', 'GB', 'TB'] as const

/**
 * A size in words, in steps of 1000 as disks are sold: '0 B', '812 kB', '63.7 MB', '1.2 GB'.
 *
 * One decimal up to a hundred of a step, none beyond.
 */
export function formatBytes(bytes: number): string {
  let value = Math.max(0, bytes)
  let step = 0
  while (value >= 999.5 && step < STEPS.length - 1) {
    value /= 1000
    step += 1
  }
  const digits = step === 0 || value >= 99.95 ? 0 : 1
  return `${value.toFixed(digits)}\u00A0${STEPS[step]}`
}
