import { z } from 'zod'
import { RECESSES } from '@/lib/calibration/proposals'
import { typedNumber } from '@/lib/format/typed-number'

const figure = typedNumber('The figure').pipe(z.number().positive())

/** Coats of a recipe whose proposals somebody accepts, with the figures that they saw. */
export const acceptCoatsInput = z.object({
  recipeId: z.uuid(),
  /** The newest version as it was seen. */
  follows: typedNumber('The version').pipe(z.int().min(1)),
  coats: z
    .array(z.object({ number: typedNumber('The coat').pipe(z.int().min(1).max(40)), needReferenceHours: figure }))
    .min(1, 'Tick the coats to accept.')
    .refine((coats) => new Set(coats.map(({ number }) => number)).size === coats.length, 'A coat can be accepted only once.'),
  /** Moves the trees that may be moved along to the new version. */
  isMovingTrees: z.boolean(),
})
export type AcceptCoatsInput = z.infer<typeof acceptCoatsInput>

/** A factor that somebody accepts, as they saw it. */
export const acceptFactorInput = z.discriminatedUnion('scope', [
  z.object({ scope: z.literal('place'), placeId: z.uuid(), factor: figure }),
  z.object({ scope: z.literal('recess'), recessClass: z.enum(RECESSES), factor: figure }),
])
export type AcceptFactorInput = z.infer<typeof acceptFactorInput>

/** A ticked coat as the form sends it: its number and the need that was shown, '3 4.42'. */
export function readTickedCoats(ticked: readonly FormDataEntryValue[]): { number: string; needReferenceHours: string }[] {
  return ticked.map((value) => {
    const [number = '', needReferenceHours = ''] = typeof value === 'string' ? value.split(' ') : []
    return { number, needReferenceHours }
  })
}
