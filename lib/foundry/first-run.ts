/** The steps of a foundry's first run, in their order. Each leaves what the next one needs. */
export const FIRST_RUN_STEPS = ['foundry', 'hours', 'baths', 'sensor', 'places', 'recipes', 'people', 'done'] as const
export type FirstRunStep = (typeof FIRST_RUN_STEPS)[number]

/** What each step is called in the list of steps. */
export const FIRST_RUN_WORDS: Record<FirstRunStep, string> = {
  foundry: 'The foundry',
  hours: 'Shift hours',
  baths: 'Baths',
  sensor: 'Room sensor',
  places: 'Places',
  recipes: 'Recipes',
  people: 'People',
  done: 'Ready',
}

/** A step by its name; null for anything else, as from an address that somebody typed. */
export function firstRunStep(name: string | undefined): FirstRunStep | null {
  return FIRST_RUN_STEPS.find((step) => step === name) ?? null
}

/** The step after one; the last has none after it. */
export function stepAfter(step: FirstRunStep): FirstRunStep {
  return FIRST_RUN_STEPS[FIRST_RUN_STEPS.indexOf(step) + 1] ?? 'done'
}

/** Whether a step may be looked at by somebody who has come as far as `reached`: that one, and every one before it. */
export function isStepOpen(step: FirstRunStep, reached: FirstRunStep): boolean {
  return FIRST_RUN_STEPS.indexOf(step) <= FIRST_RUN_STEPS.indexOf(reached)
}

/** How much of what the steps leave is there. */
export type FirstRunStock = { faceBaths: number; backupBaths: number; sensors: number; places: number }

/**
 * What is still missing before a step can be ended, as a sentence; null where nothing is.
 *
 * @example missingFor('baths', { faceBaths: 1, backupBaths: 0, sensors: 0, places: 0 }) // => 'Add a backup bath.'
 */
export function missingFor(step: FirstRunStep, { faceBaths, backupBaths, sensors, places }: FirstRunStock): string | null {
  if (step === 'baths' && faceBaths === 0) return 'Add a face bath.'
  if (step === 'baths' && backupBaths === 0) return 'Add a backup bath.'
  if (step === 'sensor' && sensors === 0) return 'Add a sensor, or say that you read the wall hygrometer.'
  if (step === 'places' && places === 0) return 'Add a place where trees hang.'
  return null
}
