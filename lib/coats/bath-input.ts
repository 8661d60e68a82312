import { z } from 'zod'

export const BATH_KINDS = ['face', 'backup'] as const
export type BathKind = (typeof BATH_KINDS)[number]

/** A slurry bath. */
export const bathInput = z.strictObject({
  name: z.string().trim().min(1, 'Name the bath.').max(40, 'A name has at most 40 letters.'),
  kind: z.enum(BATH_KINDS, 'Choose what the bath is for.'),
})
export type BathInput = z.infer<typeof bathInput>
