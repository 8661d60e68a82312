import { z } from 'zod'
import { COAT_KINDS, GUARDS, STUCCOS } from '@/lib/coats/vocabulary'
import { typedNumber } from '@/lib/format/typed-number'

export const MOST_COATS = 40

const within = (field: string, unit: string, min: number, max: number) =>
  typedNumber(field).pipe(z.number().min(min, `${field} is at least ${min} ${unit}.`).max(max, `${field} is at most ${max} ${unit}.`))

/** One coat of a recipe, inner coat first; its number is its place in the list. Hours are reference hours, the target a share of the coat's water. */
const recipeCoatInput = z.strictObject({
  kind: z.enum(COAT_KINDS, 'Choose the kind of coat.'),
  bathId: z.uuid('Choose a bath.'),
  stucco: z.enum(STUCCOS, 'Choose the stucco.'),
  needReferenceHours: within('The need', 'reference hours', 0.1, 200),
  moistureTarget: typedNumber('The target').pipe(
    z.number().min(0.01, 'The target is at least 1 % of the coat’s water.').max(0.5, 'The target is at most 50 % of the coat’s water.'),
  ),
  guard: z.enum(GUARDS, 'Choose likely or safe.'),
  drainSeconds: within('The drain', 's', 0, 600).pipe(z.int('The drain is in whole seconds.')),
  longestWaitHours: within('The longest wait', 'h', 1, 720),
  isPrewet: z.boolean(),
  readAloud: z.string().trim().max(120, 'What is read aloud has at most 120 letters.'),
})
export type RecipeCoatInput = z.infer<typeof recipeCoatInput>

const coatsInput = z
  .array(recipeCoatInput)
  .min(1, 'A recipe has at least one coat.')
  .max(MOST_COATS, `A recipe has at most ${MOST_COATS} coats.`)
  .superRefine((coats, context) => {
    const complain = (index: number, field: keyof RecipeCoatInput, message: string) =>
      context.addIssue({ code: 'custom', path: [index, field], message })
    const seals = coats.flatMap((coat, index) => (coat.kind === 'seal' ? [index] : []))
    for (const [index, { kind, stucco }] of coats.entries()) {
      if (kind === 'seal' && seals.length > 1) complain(index, 'kind', 'A shell has one seal, and it is the last coat.')
      else if (kind === 'seal' && index < coats.length - 1) complain(index, 'kind', 'The seal is the last coat.')
      if (kind === 'seal' && stucco !== 'none') complain(index, 'stucco', 'A seal is slurry alone: no stucco.')
      if (kind !== 'seal' && stucco === 'none') complain(index, 'stucco', 'Only the seal goes without stucco.')
    }
  })

export const recipeName = z.string().trim().min(1, 'Name the recipe.').max(60, 'A name has at most 60 letters.')
const versionNote = z.string().trim().max(300, 'A note has at most 300 letters.')

/** A new recipe with its first version. */
export const recipeInput = z.strictObject({ name: recipeName, note: versionNote.default(''), coats: coatsInput })
export type RecipeInput = z.infer<typeof recipeInput>

const versionNumber = typedNumber('A version').pipe(z.int().min(1))

/**
 * A further version. `from` is the version its coats were filled from; `follows` is the newest one that its maker saw, so that two
 * makers do not pass each other unseen.
 */
export const recipeVersionInput = z.strictObject({
  from: versionNumber,
  follows: versionNumber,
  note: versionNote.min(1, 'Say in a few words why there is a new version.'),
  coats: coatsInput,
})
export type RecipeVersionInput = z.infer<typeof recipeVersionInput>
